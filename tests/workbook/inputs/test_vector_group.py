"""Vector group symbols (IEC 60076-1:2011, clause on connection symbols; from memory)."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from throughfault.errors import UnitFileError
from throughfault.workbook.inputs import parse_vector_group

# letter, neutral, clock, stabilising
READ = {
    "YNd11": [("Y", True, 0, False), ("D", False, 11, False)],
    "Dyn11": [("D", False, 0, False), ("Y", True, 11, False)],
    "YNyn0d11": [("Y", True, 0, False), ("Y", True, 0, False), ("D", False, 11, False)],
    "YNyn0+d": [("Y", True, 0, False), ("Y", True, 0, False), ("D", False, 11, True)],
    "YNyn0+d5": [("Y", True, 0, False), ("Y", True, 0, False), ("D", False, 5, True)],
    "YNa0d11": [("Y", True, 0, False), ("auto", False, 0, False), ("D", False, 11, False)],
    "YNad1": [("Y", True, 0, False), ("auto", False, 0, False), ("D", False, 1, False)],
    "YNa0+d": [("Y", True, 0, False), ("auto", False, 0, False), ("D", False, 11, True)],
    "Dzn0": [("D", False, 0, False), ("Z", True, 0, False)],
    "Yzn1": [("Y", False, 0, False), ("Z", True, 1, False)],
    "Yzn11": [("Y", False, 0, False), ("Z", True, 11, False)],
    "ZNy5": [("Z", True, 0, False), ("Y", False, 5, False)],
    "Yyn0": [("Y", False, 0, False), ("Y", True, 0, False)],
    "Dd10": [("D", False, 0, False), ("D", False, 10, False)],
    "Ii0": [("I", False, 0, False), ("I", False, 0, False)],
    "Ii6": [("I", False, 0, False), ("I", False, 6, False)],
    "Ia0": [("I", False, 0, False), ("auto", False, 0, False)],
    "Ii0i0": [("I", False, 0, False), ("I", False, 0, False), ("I", False, 0, False)],
    "Ia0i0": [("I", False, 0, False), ("auto", False, 0, False), ("I", False, 0, False)],
}
REFUSED = {
    "": "begins with YN, Y, ZN, Z, D or I for the high-voltage winding",
    "ynd11": "begins with YN, Y, ZN, Z, D or I for the high-voltage winding",
    "YNd11" + "d1" * 20: "begins with YN, Y, ZN, Z, D or I for the high-voltage winding",
    "YN": "names one winding only",
    "YNq1": "cannot be read from 'q1' on",
    "YNd11\n": "cannot be read from '\\n' on",
    "YNd": "has no clock number behind 'd'",
    "YNyn": "has no clock number behind 'yn'",
    "YNyn1": "has clock number 1 behind 'yn', which can only be one of 0, 2, 4, 6, 8, 10",
    "YNd0": "has clock number 0 behind 'd', which can only be one of 1, 3, 5, 7, 9, 11",
    "Dd11": "has clock number 11 behind 'd', which can only be one of 0, 2, 4, 6, 8, 10",
    "Dyn0": "has clock number 0 behind 'yn', which can only be one of 1, 3, 5, 7, 9, 11",
    "Yzn0": "has clock number 0 behind 'zn', which can only be one of 1, 3, 5, 7, 9, 11",
    "Dzn11": "has clock number 11 behind 'zn', which can only be one of 0, 2, 4, 6, 8, 10",
    "YNd13": "has clock number 13 behind 'd', which can only be one of 1, 3, 5, 7, 9, 11",
    "YNa6": "has clock number 6 behind 'a', which can only be one of 0",
    "Ii5": "has clock number 5 behind 'i', which can only be one of 0, 6",
    "Da0": "has 'a' elsewhere than second behind a Y or I winding",
    "YNyn0a0": "has 'a' elsewhere than second behind a Y or I winding",
    "Iy0": "mixes single-phase and three-phase letters",
    "YNi0": "mixes single-phase and three-phase letters",
    "YNd11+y0": "has '+y', but a stabilising winding is a delta",
}


@pytest.mark.parametrize("symbol", READ)
def test_symbols_read(symbol):
    """Letter, neutral, clock number and whether brought out are read in order."""
    group = parse_vector_group(symbol)
    assert [(w.letter, w.neutral, w.clock, w.stabilising) for w in group.windings] == READ[symbol]


@pytest.mark.parametrize("symbol", REFUSED)
def test_symbols_refused(symbol):
    """A symbol that cannot be is refused with the reason."""
    shown = repr(symbol if len(symbol) <= 40 else f"{symbol[:40]}...")
    with pytest.raises(UnitFileError) as caught:
        parse_vector_group(symbol)
    assert caught.value.faults == (
        (
            'must be a vector group such as "YNd11" (IEC 60076-1, clause on connection symbols), '
            f"got {shown}, which {REFUSED[symbol]}."
        ),
    )


def test_kinds_of_group():
    """Autotransformers and single-phase units are told from their letters."""
    assert [
        (parse_vector_group(s).auto, parse_vector_group(s).single_phase) for s in ("YNa0", "Ia0", "Ii0", "Dyn11")
    ] == [
        (True, False),
        (True, True),
        (False, True),
        (False, False),
    ]


@given(st.text(alphabet="YNDZIyndziaN+0123456789 \n", max_size=60))
def test_any_text_is_read_or_refused(text):
    """Nothing but a group or a refusal comes of any text."""
    try:
        group = parse_vector_group(text)
    except UnitFileError:
        return
    assert group.symbol == text
    assert all(0 <= w.clock < 12 for w in group.windings)
