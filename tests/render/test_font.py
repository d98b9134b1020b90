"""The font of a record is small, complete, and the same every time."""

import re
from io import BytesIO

import pytest
from fontTools.ttLib import TTFont
from tests.render import demo

from throughfault.errors import DeclarationError
from throughfault.render import font
from throughfault.render.mathml import mathml

PAGE = mathml(
    r"\hat{\imath} = k\sqrt{2} \cdot \left(\theta_0 + \frac{h}{\Omega}\right) \begin{cases} a & b \end{cases}"
)


@pytest.fixture
def cache(tmp_path, monkeypatch):
    """A cache folder of the test's own."""
    monkeypatch.setattr(font, "user_cache_path", lambda name: tmp_path / name)
    return tmp_path


def test_code_points_hold_slanted_letters_and_the_root():
    """The browser slants letters and draws roots without being given the character."""
    points = font.code_points(PAGE)
    for sign in ("θ", "\U0001d703", "\U0001d44e", "\N{PLANCK CONSTANT}", "√", "Ω", "{", "ı", "\U0001d6a4"):
        assert ord(sign) in points, sign
    assert ord("\\") not in points  # the annotation is not shown


def test_text_outside_formulas_needs_no_font():
    """A page without a formula carries none."""
    assert font.font_face("<p>√ 12</p>") == ""


def test_subset_keeps_the_mathematical_tables(cache):
    """Brackets and roots stretch by the font's own tables."""
    cut = TTFont(BytesIO(font.subset(font.code_points(PAGE))))
    assert "MATH" in cut
    assert ord("√") in cut.getBestCmap()
    roots = cut["MATH"].table.MathVariants
    built = roots.VertGlyphConstruction[roots.VertGlyphCoverage.glyphs.index(cut.getBestCmap()[ord("√")])]
    names = [v.VariantGlyph for v in built.MathGlyphVariantRecord]
    assert len(names) > 2
    assert len({cut["hmtx"][name][0] for name in names}) == 1


def test_subset_without_a_root_is_left_alone(cache):
    """Nothing to make even."""
    assert font.subset(frozenset({ord("a")}))


def test_equal_bytes_with_and_without_cache(cache, monkeypatch):
    """A kept subset is the one that would be made."""
    points = font.code_points(PAGE)
    made = font.subset(points)
    assert len(list((cache / "throughfault" / "fonts").iterdir())) == 1
    monkeypatch.setattr(font, "_make", lambda *_: pytest.fail("the cache was not used"))
    assert font.subset(points) == made


def test_damaged_cache_is_made_anew(cache):
    """A kept file that is not whole is not used."""
    points = frozenset({ord("x")})
    made = font.subset(points)
    (kept,) = (cache / "throughfault" / "fonts").iterdir()
    kept.write_bytes(kept.read_bytes()[:-1] + b"?")
    assert font.subset(points) == made


def test_cache_that_cannot_be_written_is_no_fault(tmp_path, monkeypatch):
    """The subset is made each time."""
    blocked = tmp_path / "file"
    blocked.write_text("")
    monkeypatch.setattr(font, "user_cache_path", lambda name: blocked / name)
    assert font.subset(frozenset({ord("y")})) == font.subset(frozenset({ord("y")}))


def test_the_font_of_a_whole_record_is_small(cache):
    """Below 80 kB for a record with many formulas."""
    page = "".join(map(str, demo.html().values()))
    assert len(font.subset(font.code_points(page))) < 80_000


def test_a_missing_font_is_named(monkeypatch):
    """The package that carries it is said."""
    monkeypatch.setattr(font, "find_spec", lambda name: None)
    with pytest.raises(
        DeclarationError,
        match=re.escape("the package 'ziamath', which carries the mathematical font, is not installed."),
    ):
        font.subset(frozenset({ord("z")}))
