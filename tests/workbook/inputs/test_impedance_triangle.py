"""Impedances between three pairs must belong to some set of windings."""

import math
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from throughfault.errors import UnitFileError
from throughfault.workbook.assess.duty import assess_duty
from throughfault.workbook.assess.rules import rules_for
from throughfault.workbook.inputs import read_unit_text

T2 = (Path(__file__).parents[3] / "example_reviews" / "BV-T2" / "unit.toml").read_text(encoding="utf-8")


def test_pairs_that_no_windings_can_have_are_refused():
    """1 % and 1 % to the third winding cannot stand beside 13.5 % between the first two."""
    text = T2.replace('impedance = "7.95 %"', 'impedance = "1 %"').replace('"3.00 %"', '"1 %"')
    assert text != T2
    with pytest.raises(UnitFileError) as fault:
        read_unit_text(text)
    assert any(
        line.endswith(
            "contradict each other at tapping 'principal': no windings can have these impedances between pairs."
        )
        for line in fault.value.faults
    )


def test_tolerances_may_leave_no_such_windings():
    """What passes as given is refused where the duty, run less the tolerances, would have no transformer."""
    row = 'impedance = "7.95 %"\nbase_power = "53 MVA"\nload_loss = "150 kW"\nbasis = "measured"'
    assert row in T2
    near = T2.replace('"3.00 %"', '"1.0 %"')
    small = row.replace("7.95", "1.6").replace("measured", "guaranteed")
    read_unit_text(near.replace(row, small))
    with pytest.raises(UnitFileError) as fault:
        read_unit_text(near.replace(row, f'{small}\ntolerance = "25 %"'))
    assert [line.split(": ", 1)[1] for line in fault.value.faults] == [
        "impedances: contradict each other at tapping 'principal': no windings can have these impedances between pairs, less their tolerances."
    ]


@settings(deadline=None)  # a whole duty, not a formula: slow where the machine is busy
@given(st.floats(2.0, 20.0), st.floats(2.0, 20.0), st.floats(2.0, 20.0))
def test_what_is_accepted_can_be_solved(ab, ac, bc):
    """A file that passes gives a passive network, whose exact transient exists."""
    head = T2.split("[[impedances]]")[0]
    head = "\n".join(line for line in head.splitlines() if not line.startswith("tappings"))
    rows = "".join(
        f"""[[impedances]]
between = ["{a}", "{b}"]
tapping = "principal"
impedance = "{z!r} %"
base_power = "160 MVA"
resistance = "0.1 %"
"""
        for a, b, z in (("HV", "LV", ab), ("HV", "TV", ac), ("LV", "TV", bc))
    )
    tail = """[system.HV]
short_circuit_power = "20000 MVA"
x_over_r = 10.0
x0_over_x1 = 1.0
"""
    root = math.sqrt(ab), math.sqrt(ac), math.sqrt(bc)
    if max(root) >= 0.99 * (sum(root) - max(root)):  # no such windings, or so nearly none that rounding decides
        return
    unit = read_unit_text(head + rows + tail)
    assert assess_duty(unit, rules_for(unit)).windings["HV"].peak_exact.value > 0.0
