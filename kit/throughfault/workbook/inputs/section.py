"""The base of every table of the unit file."""

from typing import Any

from pydantic import BaseModel, ConfigDict, ValidationError, ValidationInfo, field_validator, model_validator
from pydantic_core.core_schema import ValidatorFunctionWrapHandler

from throughfault.workbook.inputs.hole import HOLE


class Section(BaseModel):
    """A table of the unit file: closed and frozen.

    Validated with the context ``{"holes": True}`` a table keeps what is right and puts a hole in
    the place of each value refused or missing; that serves only to find contradictions beside faults.
    """

    model_config = ConfigDict(extra="forbid", frozen=True, hide_input_in_errors=True)

    @model_validator(mode="before")
    @classmethod
    def _fill(cls, data: Any, info: ValidationInfo) -> Any:
        if not info.context or not isinstance(data, dict):
            return data
        kept = {name: value for name, value in data.items() if name in cls.model_fields}
        for name, field in cls.model_fields.items():
            if field.is_required():
                kept.setdefault(name, HOLE)
        return kept

    @field_validator("*", mode="wrap")
    @classmethod
    def _go_on(cls, value: Any, handler: ValidatorFunctionWrapHandler, info: ValidationInfo) -> Any:
        if not info.context:
            return handler(value)
        if value is HOLE:
            return HOLE
        try:
            return handler(value)
        except ValidationError:
            return HOLE
