"""JSON read without mercy: UTF-8, no repeated key, no NaN, nothing that two readers could read differently."""

from __future__ import annotations

import json
import math
from pathlib import Path
from typing import NoReturn, TypeVar

from pydantic import BaseModel, ValidationError

__all__ = ["model_faults", "parse_strict", "read_bounded", "read_model", "too_deep"]

DEEPEST = 20  # tables in tables; no document of the kit comes near it
Model = TypeVar("Model", bound=BaseModel)


def parse_strict(data: bytes) -> object:
    """Return the value of a JSON text.

    Raises
    ------
    ValueError
        One sentence part, to stand after the name of the file.
    """
    try:
        return json.loads(
            data.decode("utf-8"),
            object_pairs_hook=_unique_keys,
            parse_constant=_refuse_constant,
            parse_float=_finite,
        )
    except RecursionError:
        raise ValueError("is nested too deeply to be read") from None
    except ValueError as error:  # includes UnicodeDecodeError and JSONDecodeError
        raise ValueError(f"is not strict JSON in UTF-8: {error}") from None


def read_bounded(path: Path, limit: int) -> bytes:
    """Return the bytes of a file of at most `limit` bytes; ValueError or OSError otherwise."""
    with path.open("rb") as stream:
        data = stream.read(limit + 1)
    if len(data) > limit:
        raise ValueError(f"is larger than the {limit} bytes allowed")
    return data


def read_model(kind: type[Model], data: bytes) -> Model:
    """Return a strict JSON text as a model; ValueError holds every fault, separated by semicolons."""
    try:
        return kind.model_validate(parse_strict(data))
    except ValidationError as error:
        raise ValueError("; ".join(model_faults(error))) from None


def too_deep(document: object, depth: int = DEEPEST) -> bool:
    """Tell whether lists and tables stand in each other more than `depth` deep."""
    layer: list[object] = [document]
    for _ in range(depth + 1):
        layer = [
            item
            for outer in layer
            if isinstance(outer, dict | list)
            for item in (outer.values() if isinstance(outer, dict) else outer)
        ]
        if not layer:
            return False
    return True


def _unique_keys(pairs: list[tuple[str, object]]) -> dict[str, object]:
    found: dict[str, object] = {}
    for key, value in pairs:
        if key in found:
            raise ValueError(f"the key {key!r} stands twice")
        found[key] = value
    return found


def _refuse_constant(text: str) -> NoReturn:
    raise ValueError(f"{text} is not a JSON number")


def _finite(text: str) -> float:
    number = float(text)
    if not math.isfinite(number):
        raise ValueError(f"{text} is beyond the range of a double")
    return number


def model_faults(error: ValidationError) -> list[str]:
    """Return what a model found, one line each."""
    return [
        f"{'.'.join(str(step) for step in fault['loc']) or 'the document'}: {fault['msg']}"
        for fault in error.errors(include_url=False, include_context=False, include_input=False)
    ]
