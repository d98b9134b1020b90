"""HTML building blocks. Every text is escaped unless it is `Markup` already; no style, no script.

Numbers stand in ``<data value="FULL" data-id="ID">``; the classes ``identity`` (names), ``clause``
(citations), ``version`` and ``contents`` mark the only other places where digits may stand.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass

from markupsafe import Markup, escape

from throughfault.render.numbers import full_value, number_text, quantity_text
from throughfault.sources import bibliography

__all__ = [
    "NOT_ASSESSED",
    "Column",
    "Text",
    "Value",
    "breakable",
    "clause",
    "code",
    "data",
    "definitions",
    "escape",
    "figure",
    "identity",
    "items",
    "joined",
    "label",
    "note",
    "prose",
    "quantity",
    "section",
    "sentence",
    "slug",
    "source_text",
    "spanned_table",
    "table",
    "version",
]

Text = str | Markup
Value = float | int | str | bool
LONG = 15  # rows of a table that may break across printed pages
NOT_ASSESSED = Markup('<span class="absent">not assessed</span>')
_NAME = re.compile(r"`([^`]+)`|(?<!\w)'([^']+)'(?!\w)")
_BODY = re.compile(r"^(IEC|IECTR|IEEE)(?=[0-9C])")
_STANDARD = re.compile(r"IEC|IEEE")
_WORD = re.compile(r"(?<=[a-z])(?=[A-Z])")
_YEAR = re.compile(r"-(\d{4})$")


def joined(parts: Iterable[Text], between: Text = "") -> Markup:
    """Join texts, escaping those that are not markup."""
    return escape(between).join(parts)


def data(id: str, value: Value, shown: Text | None = None) -> Markup:  # noqa: A002 - the record's own word
    """Show a value that stands in the results file under `id`; `value` is kept in full."""
    if shown is None:
        shown = value if isinstance(value, str) else number_text(value)
    return Markup('<data value="{}" data-id="{}">{}</data>').format(full_value(value), id, shown)


def quantity(id: str, value: float | None, unit: str) -> Markup:  # noqa: A002 - the record's own word
    """Show a number with its unit, or that it is not assessed."""
    return NOT_ASSESSED if value is None else data(id, value, quantity_text(value, unit))


def identity(text: object) -> Markup:
    """Mark a name: tag, winding, tapping, case, key."""
    return Markup('<span class="identity">{}</span>').format(text)


def breakable(text: str) -> Markup:
    """Mark a long name that may break behind its dots and slashes."""
    return identity(re.sub(r"([./])", "\\1\N{ZERO WIDTH SPACE}", text))


def code(text: object) -> Markup:
    """Mark a key, file or command."""
    return Markup('<code class="identity">{}</code>').format(text)


def version(text: object) -> Markup:
    """Mark a version or a hash."""
    return Markup('<span class="version">{}</span>').format(text)


def source_text(citation: str) -> str:
    """Write a citation as the trade does, ``IEC 60076-5:2006, 4.1.5``; other keys of the bibliography in words."""
    key, comma, where = citation.partition(",")
    if key in bibliography() and not _STANDARD.match(key):
        return _words(key) + comma + where
    return _BODY.sub(lambda m: m[1].replace("IECTR", "IEC TR") + " ", citation)


def _words(key: str) -> str:
    """Write the key of a theory or a book: ``circuit theory``, ``Wagner, Evans (1933)``."""
    parts = _WORD.split(key)
    if len(parts) > 1:
        return " ".join(parts).lower()
    return _YEAR.sub(r" (\1)", key).replace("-", ", ")


def clause(citation: str, provenance: str | None = None) -> Markup:
    """Cite a source, with the word that tells how the kit came to know it."""
    cited = Markup('<span class="clause">{}</span>').format(source_text(citation))
    return cited if provenance is None else cited + Markup(' <span class="provenance">({})</span>').format(provenance)


def prose(text: str) -> Markup:
    """Escape a sentence; names in backquotes or single quotes become names of the record."""
    parts, at = [], 0
    for match in _NAME.finditer(text):
        quote = "" if match[1] else "'"
        parts += [escape(text[at : match.start()] + quote), identity(match[1] or match[2]), escape(quote)]
        at = match.end()
    return joined([*parts, text[at:]])


def label(text: str) -> Markup:
    """Escape the name of a quantity; one that holds a digit is a name throughout (resistivity at 20 degC)."""
    return identity(text) if any(letter.isdecimal() for letter in text) else prose(text)


def note(text: Text, kind: str = "note") -> Markup:
    """Set a remark apart."""
    return Markup('<p class="{}">{}</p>').format(kind, text)


def items(entries: Iterable[Text], kind: str = "points") -> Markup:
    """List sentences."""
    return Markup('<ul class="{}">{}</ul>').format(kind, joined(Markup("<li>{}</li>").format(e) for e in entries))


def definitions(pairs: Iterable[tuple[Text, Text]]) -> Markup:
    """List terms with what they are."""
    rows = (Markup("<div><dt>{}</dt><dd>{}</dd></div>").format(term, given) for term, given in pairs)
    return Markup('<dl class="facts">{}</dl>').format(joined(rows))


def sentence(text: str) -> str:
    """Begin with a capital and leave the rest: names such as LV stay as they are."""
    return text[:1].upper() + text[1:]


def slug(text: str) -> str:
    """Make an element id of a text."""
    return re.sub(r"[^a-z0-9]+", "-", text.lower()).strip("-") or "part"


def section(title: str, *content: Text, id: str | None = None, kind: str = "part", level: int = 2) -> Markup:  # noqa: A002
    """Make a titled section with its landmark."""
    named = id or slug(title)
    return Markup(
        '<section class="{kind}" aria-labelledby="{id}"><h{level} id="{id}">{title}</h{level}>{content}</section>'
    ).format(kind=kind, id=named, level=level, title=title, content=joined(content))


def figure(source: str, id: str, caption: Text, alternative: str) -> Markup:  # noqa: A002 - the element's own word
    """Set an image given as ``data:`` URI, with caption and text alternative."""
    return Markup(
        '<figure id="{}"><img alt="{}" src="{}"><figcaption>{}</figcaption></figure>'
    ).format(id, alternative, source, caption)  # fmt: skip


@dataclass(frozen=True, slots=True)
class Column:
    """A column of a table: its head, and whether it holds numbers (set to the right)."""

    head: Text
    numeric: bool = False


def _cells(columns: Sequence[Column], row: Sequence[Text], before: Text = "") -> Markup:
    first = Markup('<th scope="row">{}</th>').format(row[0])
    rest = (
        Markup('<td class="number">{}</td>').format(cell) if column.numeric else Markup("<td>{}</td>").format(cell)
        for column, cell in zip(columns[1:], row[1:], strict=True)
    )
    return Markup("<tr>{}{}{}</tr>\n").format(before, first, joined(rest))


def _head(column: Column) -> Markup:
    mark = Markup(' class="number"') if column.numeric else Markup("")
    return Markup('<th scope="col"{}>{}</th>').format(mark, column.head)


def table(
    caption: Text,
    columns: Sequence[Column | str],
    rows: Sequence[Sequence[Text]] | Mapping[Text, Sequence[Sequence[Text]]],
    kind: str = "plain",
) -> Markup:
    """Set a table; the first cell of a row heads it. A mapping gives groups of rows by their heading."""
    made = [column if isinstance(column, Column) else Column(column) for column in columns]
    groups: Mapping[Text, Sequence[Sequence[Text]]] = rows if isinstance(rows, Mapping) else {"": rows}
    bodies = []
    for heading, group in groups.items():
        title = Markup('<tr class="group"><th scope="rowgroup" colspan="{}">{}</th></tr>\n').format(len(made), heading)
        body = joined(_cells(made, row) for row in group)
        bodies.append(Markup("<tbody>{}{}</tbody>\n").format(title if heading else "", body))
    long = sum(len(group) for group in groups.values()) > LONG
    return _framed(caption, made, bodies, f"{kind} long" if long else kind)


def spanned_table(
    caption: Text,
    columns: Sequence[Column | str],
    groups: Mapping[str, Sequence[Sequence[Text]]],
    kind: str = "plain",
) -> Markup:
    """Set groups of rows, each with its name in the first column beside all of them."""
    made = [column if isinstance(column, Column) else Column(column) for column in columns]
    bodies = []
    for name, group in groups.items():
        heading = Markup('<th scope="rowgroup" rowspan="{}">{}</th>').format(len(group), identity(name))
        rows = (_cells(made[1:], row, "" if number else heading) for number, row in enumerate(group))
        bodies.append(Markup("<tbody>{}</tbody>\n").format(joined(rows)))
    return _framed(caption, made, bodies, kind)


def _framed(caption: Text, columns: Sequence[Column], bodies: Sequence[Markup], kind: str) -> Markup:
    head = joined(_head(column) for column in columns)
    return Markup(
        '<div class="scroll"><table class="{}"><caption>{}</caption><thead><tr>{}</tr></thead>\n{}</table></div>\n'
    ).format(kind, caption, head, joined(bodies))  # fmt: skip
