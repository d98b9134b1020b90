"""The unit file described for editors: a JSON schema made from the model."""

from __future__ import annotations

from typing import Any

from throughfault.workbook.inputs.model import UnitFile

__all__ = ["json_schema"]

DIALECT = "https://json-schema.org/draft/2020-12/schema"
#: what the model's generator writes that says nothing about the file
_NOISE = ("title", "default", "source", "default_in_words")


def json_schema() -> dict[str, Any]:
    """Return the JSON schema (draft 2020-12) of the unit file.

    Quantities are text with a number and one of the units of their kind. Contradictions between keys
    are beyond a schema; reading the file finds those.
    """
    made = UnitFile.model_json_schema()
    _flatten_system(made["$defs"]["System"])
    cleaned = _clean(made)
    return {"$schema": DIALECT, "title": "Throughfault unit file", **cleaned}


def _flatten_system(system: dict[str, Any]) -> None:
    """Put the terminals where the file has them: beside the other keys of [system]."""
    terminals = system["properties"].pop("terminals")
    (system["additionalProperties"],) = terminals["patternProperties"].values()


def _clean(node: Any) -> Any:
    """Return the schema without noise; an optional key is one that may be absent, TOML has no null."""
    if isinstance(node, list):
        return [_clean(item) for item in node]
    if not isinstance(node, dict):
        return node
    options = node.get("anyOf")
    if options is not None and {"type": "null"} in options:
        rest = [option for option in options if option != {"type": "null"}]
        node = {**node, "anyOf": rest}
        if len(rest) == 1:
            node = {**rest[0], **{k: v for k, v in node.items() if k != "anyOf"}}
    made: dict[str, Any] = {}
    for name, value in node.items():
        if name in {"properties", "$defs"}:  # keys of the file, not words of the schema
            made[name] = {key: _clean(item) for key, item in value.items()}
        elif name not in _NOISE:
            made[name] = _clean(value)
    if "patternProperties" in made:
        made["additionalProperties"] = False
    source = node.get("source")
    if source:
        made["description"] = f"{made.get('description', '')} Source: {source}.".strip()
    return made
