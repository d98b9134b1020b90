"""From an executed notebook to the record's one page."""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from importlib.resources import files
from typing import Any, ClassVar

from jupyter_core.paths import ENV_JUPYTER_PATH, SYSTEM_JUPYTER_PATH
from markupsafe import Markup
from nbconvert.exporters import TemplateExporter
from nbformat import NotebookNode, from_dict
from traitlets import default
from traitlets.config import Config

from throughfault.errors import RunError
from throughfault.render.html import slug
from throughfault.render.record.lint import POLICY, lint, style_hash
from throughfault.render.record.markdown import note_html
from throughfault.render.record.sanitise import sanitise
from throughfault.render.record.style import style_sheet

__all__ = ["RecordExporter", "export_record"]

SHOWN = ("text/html", "text/markdown", "text/plain")
_HEADING = re.compile(r"<h([23])((?: [^>]*)?)>(.*?)</h\1>", re.DOTALL)
_ID = re.compile(r' id="([^"]*)"')
_TAGS = re.compile(r"<[^>]*>")
_PLACE = re.compile(r'<nav class="contents"[^>]*></nav>')
_PAGE = Markup(
    '<!DOCTYPE html>\n<html lang="en">\n<head>\n<meta charset="utf-8">\n'
    '<meta http-equiv="Content-Security-Policy" content="{policy}">\n'
    '<meta name="viewport" content="width=device-width, initial-scale=1">\n'
    '<title class="identity">{tag}, revision {revision}: {title}</title>\n<style>{style}</style>\n</head>\n<body>\n'
    '<a class="skip" href="#record">Skip to the record</a>\n'
    '<header class="identity"><h1>{title}</h1><p class="tag">{tag}, revision {revision}</p></header>\n'
    '<main id="record" tabindex="-1">\n{body}\n</main>\n'
    '<footer><p class="identity">End of record {tag}, revision {revision}.</p></footer>\n</body>\n</html>\n'
)  # fmt: skip


class RecordExporter(TemplateExporter):  # type: ignore[misc]  # the library is not typed
    """Renders the body of a record: notes escaped, findings through the allowlist, code left out."""

    output_mimetype = "text/html"
    template_filters: ClassVar[dict[str, Callable[[str], str]]] = {
        "note": lambda source: sanitise(note_html(source)),
        "sanitise": sanitise,
    }

    def __init__(self) -> None:
        folder = str(files("throughfault.render.record").joinpath("template"))
        config = Config({"NbConvertBase": {"display_data_priority": list(SHOWN)}})
        super().__init__(config=config, template_name="review_record", extra_template_basedirs=[folder])
        for name, function in self.template_filters.items():
            self.register_filter(name, function)

    @default("file_extension")
    def _file_extension_default(self) -> str:
        return ".html"

    def get_prefix_root_dirs(self) -> list[str]:
        """Look for base templates where they are installed, never in a user's folder."""
        return [*ENV_JUPYTER_PATH, *SYSTEM_JUPYTER_PATH]

    def from_notebook_node(
        self, nb: NotebookNode, resources: dict[str, Any] | None = None, **kwargs: Any
    ) -> tuple[str, dict[str, Any]]:
        """Render the body.

        Raises
        ------
        RunError
            If a cell ended in an error: such a notebook is no record.
        """
        for position, cell in enumerate(nb["cells"], start=1):
            for output in cell.get("outputs", ()):
                if output["output_type"] == "error":
                    raise RunError(f"cell {position} ended in {output['ename']}: {output['evalue']}")
        made: tuple[str, dict[str, Any]] = super().from_notebook_node(nb, resources, **kwargs)
        return made


def _numbered(body: str) -> tuple[str, list[tuple[int, str, str]]]:
    """Give every heading an id; return the headings as (level, id, text)."""
    found: list[tuple[int, str, str]] = []
    taken = set(_ID.findall(body))

    def name(match: re.Match[str]) -> str:
        level, attributes, content = match[1], match[2], match[3]
        text = _TAGS.sub("", re.sub(r"<annotation.*?</annotation>", "", content, flags=re.DOTALL))
        given = _ID.search(attributes)
        if given is None:
            base = slug(text)
            id_ = next(c for c in (base, *(f"{base}-{n}" for n in range(2, 10_000))) if c not in taken)
            taken.add(id_)
            attributes += f' id="{id_}"'
        else:
            id_ = given[1]
        found.append((int(level), id_, text))
        return f"<h{level}{attributes}>{content}</h{level}>"

    return _HEADING.sub(name, body), found


def _contents(headings: list[tuple[int, str, str]]) -> str:
    rows = "".join(f'<li class="level-{level}"><a href="#{id_}">{text}</a></li>\n' for level, id_, text in headings)
    return f'<nav class="contents" aria-label="Contents"><p class="title">Contents</p><ol>\n{rows}</ol></nav>'


def _shown(notebook: NotebookNode) -> NotebookNode:
    """Return the notebook without the data that a page does not show; the library copies it twice."""
    cells = []
    for cell in notebook["cells"]:
        outputs = [
            {**o, "data": {kind: o["data"][kind] for kind in SHOWN if kind in o["data"]}} if "data" in o else o
            for o in cell.get("outputs", ())
        ]
        cells.append({**cell, "outputs": outputs} if outputs else dict(cell))
    made: NotebookNode = from_dict({**notebook, "cells": cells})
    return made


def export_record(notebook: NotebookNode, results: Mapping[str, Any]) -> str:
    """Make the record's page of an executed notebook; the results name the unit.

    The table of contents takes the place of an empty ``nav`` of class ``contents``, or stands first.

    Raises
    ------
    RunError
        If a cell ended in an error, or the page fails its last inspection.
    """
    body, _ = RecordExporter().from_notebook_node(_shown(notebook))
    body, headings = _numbered(body)
    contents = _contents(headings)
    body = _PLACE.sub(lambda _: contents, body, count=1) if _PLACE.search(body) else contents + body
    unit = results["unit"]
    style = style_sheet(body, unit["tag"], unit["revision"])
    page = str(_PAGE.format(
        policy=Markup(POLICY.format(style_hash(style))), style=Markup(style), body=Markup(body),  # noqa: S704 - sanitised
        tag=unit["tag"], revision=unit["revision"], title=unit["title"],
    ))  # fmt: skip
    if faults := lint(page):
        raise RunError("the record is not clean: " + " ".join(faults))
    return page
