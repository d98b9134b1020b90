"""What the annotations of the model say."""

from __future__ import annotations

import types
from collections.abc import Iterator
from typing import Any, Union, get_args, get_origin

from pydantic.fields import FieldInfo

from throughfault.workbook.inputs.leaves import Leaf

__all__ = ["leaf_of", "plain_type"]


def leaf_of(field: FieldInfo) -> Leaf | None:
    """Return the leaf that reads a field, if it is not a table."""
    annotation: Any = field.annotation
    candidates = [*field.metadata, *_metadata(annotation)]
    return next((item for item in candidates if isinstance(item, Leaf)), None)


def plain_type(annotation: Any) -> Any:
    """Return the type without its notes and without None."""
    if hasattr(annotation, "__metadata__"):
        return plain_type(annotation.__origin__)
    if get_origin(annotation) in (Union, types.UnionType):
        members = [member for member in get_args(annotation) if member is not type(None)]
        return plain_type(members[0]) if len(members) == 1 else annotation
    return annotation


def _metadata(annotation: Any) -> Iterator[Any]:
    """Yield what is annotated on a type or on the members of its union."""
    if hasattr(annotation, "__metadata__"):
        yield from annotation.__metadata__
    elif get_origin(annotation) in (Union, types.UnionType):
        for member in get_args(annotation):
            yield from _metadata(member)
