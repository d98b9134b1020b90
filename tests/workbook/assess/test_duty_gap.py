"""Where data are missing the duty says so, and nothing that was not run counts as nothing."""

import math

import pytest
from tests.workbook.assess.test_duty import TWO_WINDING, bank, duty_of, make

from throughfault.workbook.assess.fault_solution import ratio_of
from throughfault.workbook.assess.review import Review
from throughfault.workbook.inputs import read_unit_text

CONDUCTORS = 'conductor_material = "copper"\nconductor_section = "200 mm^2"\n'


def with_conductors(text):
    """Give both windings conductors and the unit a start temperature, so that thermal ability can be assessed."""
    text = text.replace('highest_voltage = "145 kV"', 'highest_voltage = "145 kV"\n' + CONDUCTORS)
    text = text.replace('highest_voltage = "36 kV"', 'highest_voltage = "36 kV"\n' + CONDUCTORS)
    return text.replace('core = "', 'start_temperature = "105 degC"\ncore = "')


def assessed(**options):
    more = options.pop("more", "")
    given = {"group": "YNd11", "core": "three-limb", "phases": 3, "impedance": "", "system": "", **options}
    return Review(read_unit_text(with_conductors(TWO_WINDING.format(**given)) + more))


def test_a_whole_set_of_cases_may_withstand():
    """With every case run thermal ability is judged."""
    review = assessed()
    assert review.conclusion.verdicts["thermal"] == "withstands"
    assert not [check.id for check in review.checks if check.id.startswith("duty.complete")]


@pytest.mark.parametrize(
    ("options", "hidden"),
    [
        ({"group": "YNyn0"}, "duty.earth_fault.HV, duty.earth_fault.LV"),
        ({"group": "Yyn0"}, "duty.earth_fault.LV"),
        ({"group": "Dzn0"}, "duty.earth_fault.LV"),
    ],
)
def test_cases_that_could_not_be_run_block_the_verdict(options, hidden):
    """Earth faults not assessed leave thermal ability not assessed, and the reason names them."""
    review = assessed(**options)
    assert review.conclusion.verdicts["thermal"] == "not assessed"
    checks = {check.id: check for check in review.checks}
    assert checks["duty.complete.thermal"].reason == f"cases that apply could not be run: {hidden}"
    assert checks["duty.complete.dynamic"].verdict == "not assessed"


def test_a_neutral_without_earth_faults_is_not_assessed():
    """A neutral current that no case was run for is no zero, and its apparatus is not within."""
    more = '[neutral.LV]\nshort_time_current = "1 kA"\nduration = "2 s"\n'
    duty = duty_of(make(group="YNyn0", more=more))
    found = {o.id: o for o in duty.fragment.quantities}
    assert found["duty.neutral.LV"].value is None
    checks = {check.id: check.verdict for check in duty.fragment.checks}
    assert checks["apparatus.neutral.LV.short_time_current"] == "not assessed"


@pytest.mark.parametrize("group", ["Yzn11", "Dzn0"])
def test_other_faults_do_not_depend_on_an_interstar_s_zero_sequence(group):
    """Three-phase and line-to-line currents and their factors are the same with and without that impedance."""
    resistance = 'resistance = "4 %"'
    bare = duty_of(make(group=group, impedance=resistance))
    given = duty_of(make(group=group, impedance=f'{resistance}\nzero_sequence = "2 %"'))
    entries = {entry["id"]: entry for entry in given.entries}
    assert {entry["fault"] for entry in bare.entries if entry["at"] == "LV"} == {"3ph", "LL"}
    for entry in bare.entries:
        if entry["fault"] in ("LG", "LLG"):  # at the delta or unearthed star: nothing through the transformer
            continue
        other = entries[entry["id"]]
        for winding in ("HV", "LV"):
            assert entry["currents"][winding]["b"]["peak"] == pytest.approx(
                other["currents"][winding]["b"]["peak"], rel=1e-9
            )
        assert entry["driving_point"]["resistance"] >= 0.0


def test_an_interstar_needs_its_own_impedance_only():
    """With the pair's zero-sequence impedance a three-limb interstar unit is assessed: its halves balance."""
    duty = duty_of(make(group="Yzn11", impedance='zero_sequence = "2 %"'))
    assert duty.fragment.missing == ()
    assert ("LV", "LG") in {(entry["at"], entry["fault"]) for entry in duty.entries}


def test_an_unearthed_star_needs_no_magnetising_impedance():
    """Only the terminal whose own neutral is earthed is named as lacking it."""
    missing = duty_of(make(group="Yyn0")).fragment.missing
    assert [item.id for item in missing] == ["duty.earth_fault.LV"]


def test_negative_resistance_at_the_fault_is_a_fault_of_the_kit():
    """It is never taken for a circuit without resistance."""
    with pytest.raises(
        Exception, match=r"^the driving-point impedance at the fault must not have negative resistance, got "
    ):
        ratio_of(complex(-0.1, 1.0))
    assert ratio_of(complex(0.0, 1.0)) == math.inf


def test_out_of_phase_closing_needs_a_second_network():
    """With one network nothing can be closed on, and the missing one is named."""
    (missing,) = duty_of(make(system='out_of_phase = "180 deg"')).fragment.missing
    assert missing.id == "duty.out_of_phase.HV"
    assert missing.keys == ("system.LV.short_circuit_power",)


def test_out_of_phase_closing_that_was_asked_for_and_not_run_blocks_the_verdict():
    """A case that the file asks for counts as one that applies."""
    review = assessed(system='out_of_phase = "180 deg"')
    assert review.conclusion.verdicts["thermal"] == "not assessed"


def test_a_neutral_that_no_case_loads_is_no_zero():
    """Without a zero-sequence path but the core's the neutral's current is not assessed, nor is what it flows through."""
    more = '[neutral.LV]\nshort_time_current = "1 kA"\nduration = "2 s"\n'
    duty = duty_of(make(group="Yyn0", core="five-limb", more=more))
    found = {o.id: o for o in duty.fragment.quantities}
    assert found["duty.neutral.LV"].value is None
    assert {check.verdict for check in duty.fragment.checks} == {"not assessed"}


def test_a_fault_fed_past_the_transformer_is_not_asked_of_it():
    """Cases without current in the transformer do not count as required."""
    entries = {entry["id"]: entry for entry in duty_of(make()).entries}
    assert not entries["principal/HV/3ph/HV"]["required_by_standard"]
    assert entries["principal/LV/3ph/HV"]["required_by_standard"]


def test_a_bank_s_worked_lines_are_the_bank_s():
    """Rated current and impedance are those of the whole bank, however its powers are stated, and the extras extra."""
    one, whole = duty_of(bank(1, "100 MVA")), duty_of(bank(3, "300 MVA"))
    for name in ("rated_current", "transformer_impedance"):
        values = [
            next(s.result.value for s in d.fragment.steps if s.id == f"duty.closed_form.HV-LV.{name}")
            for d in (one, whole)
        ]
        assert values[0] == pytest.approx(values[1], rel=1e-12)
    assert values[0] == pytest.approx(0.12 * 400**2 / 300, rel=1e-12)


def test_closed_form_takes_the_row_s_own_base():
    """The impedance worked on the page is the row's, on the row's base, whatever the power of the windings."""
    text = TWO_WINDING.format(group="YNd11", core="five-limb", phases=3, impedance="", system="")
    text = text.replace('base_power = "40 MVA"', 'base_power = "10 MVA"')
    text += '[system.LV]\nshort_circuit_power = "500 MVA"\n'
    head, tail = text.split("[windings.LV]", 1)
    unit = read_unit_text(f"{head}[windings.LV]{tail.replace('40 MVA', '20 MVA', 1)}")
    steps = {step.id: step.result.value for step in duty_of(unit).fragment.steps}
    assert steps["duty.closed_form.LV-HV.transformer_impedance"] == pytest.approx(0.10 * 33**2 / 10, rel=1e-12)
    assert steps["duty.closed_form.HV-LV.transformer_impedance"] == pytest.approx(0.10 * 132**2 / 10, rel=1e-12)


def test_a_reactor_has_no_place_in_the_closed_form():
    """Behind a series reactance the closed form is left out, and the network decides."""
    steps = duty_of(make(system='series_reactance = "10 ohm"')).fragment.steps
    assert not [step.id for step in steps if step.id.startswith("duty.closed_form")]


def test_the_governing_case_is_worked_out():
    """Tolerance, impedance, current and peak of the governing three-phase case stand on the page."""
    impedance = 'resistance = "0.5 %"\ntolerance = "7.5 %"'
    duty = duty_of(make(impedance=impedance, system="x_over_r = 12.0\nx0_over_x1 = 1.0"))
    steps = {step.id: step for step in duty.fragment.steps}
    assert duty.windings["HV"].symmetrical_case == "principal/LV/3ph/HV/tolerance"
    assert steps["duty.closed_form.HV-LV.tolerance.impedance"].result.value == pytest.approx(9.25)
    closed = steps["duty.closed_form.HV-LV.tolerance.symmetrical"].result.value
    assert closed == pytest.approx(duty.windings["HV"].symmetrical, rel=2e-3)
    assert steps["duty.HV.delta_current"].result.value == pytest.approx(duty.windings["LV"].symmetrical, rel=1e-9)


def test_a_peak_is_known_as_well_as_its_factor():
    """A peak by a recalled default is recalled, not derived, and names the standard."""
    found = {o.id: o for o in duty_of(make()).fragment.quantities}
    assert found["duty.HV.peak"].provenance == "recalled"
    assert found["duty.HV.peak"].source.startswith("IEC60076-5:2006")
    assert found["duty.HV.symmetrical"].provenance == "derived"
