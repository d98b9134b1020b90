"""The mathematical font of a record: a subset of STIX Two Math with the glyphs the record needs.

The reader's own fonts would decide how fractions, roots and brackets stretch, so the record carries
its own. The subset is a function of font, code points and library version alone, and is cached under
their hash in the user's cache folder; without a folder to write to it is made anew.
"""

from __future__ import annotations

import base64
import hashlib
import html
import logging
import re
import zlib
from collections.abc import Iterable
from importlib.metadata import version
from importlib.util import find_spec
from io import BytesIO
from pathlib import Path
from tempfile import NamedTemporaryFile
from typing import TYPE_CHECKING

from platformdirs import user_cache_path

from throughfault.errors import DeclarationError

if TYPE_CHECKING:
    from fontTools.ttLib import TTFont

__all__ = ["FAMILY", "code_points", "font_face", "subset"]

FAMILY = "Record Math"
ROOT = ord("√")
_MATH = re.compile(r"<math\b.*?</math>", re.DOTALL)
_ANNOTATION = re.compile(r"<annotation\b.*?</annotation>|<[^>]*>", re.DOTALL)
#: letters a one-letter identifier is slanted to by the browser: a-z, A-Z, Greek
_LATIN, _GREEK = 0x1D44E - ord("a"), 0x1D6FC - ord("\N{GREEK SMALL LETTER ALPHA}")
_CAPITAL_LATIN, _CAPITAL_GREEK = 0x1D434 - ord("A"), 0x1D6E2 - ord("\N{GREEK CAPITAL LETTER ALPHA}")
_SPECIAL = {
    "h": 0x210E, "\N{LATIN SMALL LETTER DOTLESS I}": 0x1D6A4, "\N{LATIN SMALL LETTER DOTLESS J}": 0x1D6A5,
    "\N{GREEK THETA SYMBOL}": 0x1D717, "\N{GREEK PHI SYMBOL}": 0x1D719, "\N{GREEK LUNATE EPSILON SYMBOL}": 0x1D716,
}  # fmt: skip


def _font_bytes() -> bytes:
    found = find_spec("ziamath")  # found, not imported: only its font is wanted
    if found is None or not found.submodule_search_locations:
        raise DeclarationError("the package 'ziamath', which carries the mathematical font, is not installed.")
    return Path(found.submodule_search_locations[0], "fonts", "STIXTwoMath-Regular.ttf").read_bytes()


def _slanted(letter: str) -> int | None:
    if letter in _SPECIAL:
        return _SPECIAL[letter]
    for first, last, shift in (
        ("a", "z", _LATIN),
        ("A", "Z", _CAPITAL_LATIN),
        ("\N{GREEK SMALL LETTER ALPHA}", "\N{GREEK SMALL LETTER OMEGA}", _GREEK),
        ("\N{GREEK CAPITAL LETTER ALPHA}", "\N{GREEK CAPITAL LETTER OMEGA}", _CAPITAL_GREEK),
    ):
        if first <= letter <= last:
            return ord(letter) + shift
    return None


def code_points(page: str) -> frozenset[int]:
    """Collect the characters that the formulas of a page show, upright and slanted, and the signs drawn unasked."""
    shown = "".join(html.unescape(_ANNOTATION.sub("", formula)) for formula in _MATH.findall(page))
    slanted = (_slanted(letter) for letter in set(shown))
    roots = {ROOT} if "<msqrt" in page or "<mroot" in page else set()  # an element's sign, no character
    return frozenset({*map(ord, shown), *(point for point in slanted if point is not None), *roots})


def _even_roots(font: TTFont) -> None:
    """Make every size of the root's sign as wide as the smallest.

    Browsers reserve the width of the widest size for each root, which leaves a gap behind small ones.
    """
    root = font.getBestCmap().get(ROOT)
    variants = font["MATH"].table.MathVariants
    if root is None or root not in variants.VertGlyphCoverage.glyphs:
        return
    built = variants.VertGlyphConstruction[variants.VertGlyphCoverage.glyphs.index(root)]
    parts = built.GlyphAssembly.PartRecords if built.GlyphAssembly else []
    names = {v.VariantGlyph for v in built.MathGlyphVariantRecord} | {part.glyph for part in parts}
    width = font["hmtx"][root][0]
    for name in sorted(names - {root}):
        advance, bearing = font["hmtx"][name]
        glyph = font["glyf"][name]
        glyph.coordinates.scale((width / advance, 1.0))
        glyph.coordinates.toInt()
        glyph.recalcBounds(font["glyf"])
        font["hmtx"][name] = (width, round(bearing * width / advance))


def _make(font: bytes, points: Iterable[int]) -> bytes:
    from fontTools.subset import Options, Subsetter  # noqa: PLC0415 - slow to import, and a cached subset needs none
    from fontTools.ttLib import TTFont  # noqa: PLC0415

    options = Options(
        flavor="woff", layout_features=["*"], hinting=False, notdef_outline=True, name_IDs=[], desubroutinize=True,
        recalc_timestamp=False, drop_tables=["DSIG", "meta", "SVG "], glyph_names=False,
    )  # fmt: skip
    loaded = TTFont(BytesIO(font), recalcTimestamp=False)
    logging.getLogger("fontTools").setLevel(logging.ERROR)
    subsetter = Subsetter(options)
    subsetter.populate(unicodes=points)
    subsetter.subset(loaded)
    _even_roots(loaded)
    loaded.flavor = "woff"
    out = BytesIO()
    loaded.save(out, reorderTables=True)
    return out.getvalue()


def _keep(path: Path, made: bytes) -> None:
    """Keep a subset for the next record; a cache that cannot be written is no fault."""
    try:
        path.parent.mkdir(parents=True, exist_ok=True)
        with NamedTemporaryFile(dir=path.parent, delete=False) as file:
            file.write(made)
        Path(file.name).replace(path)
    except OSError:
        return


def subset(points: frozenset[int]) -> bytes:
    """Return the font cut to `points` as WOFF, tables for mathematics kept."""
    font = _font_bytes()
    key = hashlib.sha256(font)
    made_by = f"fonttools {version('fonttools')} zlib {zlib.ZLIB_RUNTIME_VERSION} even roots"
    key.update(f"{sorted(points)} {made_by}".encode())
    path = user_cache_path("throughfault") / "fonts" / f"{key.hexdigest()}.woff"
    try:
        cached = path.read_bytes()
    except OSError:
        cached = b""
    # The first 32 bytes of a kept file are its hash, so that a damaged cache is made anew.
    if hashlib.sha256(cached[32:]).digest() == cached[:32]:
        return cached[32:]
    made = _make(font, sorted(points))
    _keep(path, hashlib.sha256(made).digest() + made)
    return made


def font_face(page: str) -> str:
    """Return the style rule that carries the font of a page; empty where it has no formula."""
    points = code_points(page)
    if not points:
        return ""
    encoded = base64.b64encode(subset(points)).decode("ascii")
    return f'@font-face{{font-family:"{FAMILY}";src:url(data:font/woff;base64,{encoded}) format("woff")}}\n'
