"""Heat put into a conductor and heat that conductor and insulation take up, for the all-heat-stored form."""

from __future__ import annotations

from typing import Annotated

from throughfault import nomenclature as nom
from throughfault.cells.thermal_withstand import ADIABATIC_TO
from throughfault.declare import Range, cell
from throughfault.sources import Source

CLAUSE = Source("IEEEC57.12.00-2015", "7.4", "recalled")
TEMPERATURE = {"at_least": -60.0, "at_most": 400.0}
TESTS = "tests/cells/test_heat_content.py"
SECTIONS = (Range("insulation_section", at_least=0.0), Range("conductor_section", above=0.0))
TEMPERATURES = (Range("start_temperature", **TEMPERATURE), Range("final_temperature", at_least=-60.0, at_most=2000.0))


@cell(
    title="Loss of the conductor when the fault begins, from current density",
    source=Source("IEEEC57.12.00-2015", "7.4, loss at rated current written with resistivity and density", "derived"),
    valid_for=(
        Range("current_density", at_least=0.0),
        Range("start_temperature", **TEMPERATURE),
        Range("temperature_offset", at_least=200.0, at_most=300.0),
        Range("resistivity_20", above=0.0),
        Range("density", above=0.0),
    ),
    checks=("tests/published/thermal.toml::direct loss of copper: 2.36 W/kg at 1 A/mm^2 and 75 degC",),
)
def start_loss(
    current_density: Annotated[float, nom.current_density],
    start_temperature: Annotated[float, nom.start_temperature],
    temperature_offset: Annotated[float, nom.temperature_offset],
    resistivity_20: Annotated[float, nom.resistivity_20],
    density: Annotated[float, nom.density],
) -> Annotated[float, nom.start_loss]:
    """D.c. loss per mass; the million collects uohm m and A/mm^2."""
    J, T_s, T_k, rho_20, gamma = current_density, start_temperature, temperature_offset, resistivity_20, density
    return 1000000 * rho_20 * (T_k + T_s) / (T_k + 20) * J**2 / gamma


@cell(
    title="Eddy loss over d.c. loss when the fault begins",
    source=CLAUSE,
    valid_for=(
        Range("eddy_share", at_least=0.0),
        Range("reference_temperature", **TEMPERATURE),
        Range("start_temperature", **TEMPERATURE),
        Range("temperature_offset", at_least=200.0, at_most=300.0),
    ),
    checks=(f"{TESTS}::test_eddy_share_is_unchanged_at_the_reference_temperature: lower when hotter",),
)
def start_eddy_share(
    eddy_share: Annotated[float, nom.eddy_share],
    reference_temperature: Annotated[float, nom.reference_temperature],
    start_temperature: Annotated[float, nom.start_temperature],
    temperature_offset: Annotated[float, nom.temperature_offset],
) -> Annotated[float, nom.start_eddy_share]:
    """Eddy loss falls and d.c. loss rises with temperature."""
    e_r, T_r, T_s, T_k = eddy_share, reference_temperature, start_temperature, temperature_offset
    return e_r * ((T_k + T_r) / (T_k + T_s)) ** 2


@cell(
    title="Heat content of a copper conductor and its insulation",
    source=CLAUSE,
    valid_for=(*TEMPERATURES, *SECTIONS),
    checks=(f"{TESTS}::test_heat_contents_are_those_of_the_table: to the last digit",),
)
def heat_content_copper(
    start_temperature: Annotated[float, nom.start_temperature],
    final_temperature: Annotated[float, nom.final_temperature],
    insulation_section: Annotated[float, nom.insulation_section],
    conductor_section: Annotated[float, nom.conductor_section],
) -> Annotated[float, nom.heat_content]:
    """Mean over the rise, for a kilogram of conductor with its share of insulation."""
    T_s, T_f, A_i, A_c = start_temperature, final_temperature, insulation_section, conductor_section
    return 384 + 0.0496 * (T_s + T_f) + 243 * A_i / A_c


@cell(
    title="Heat content of an aluminium conductor and its insulation",
    source=CLAUSE,
    valid_for=(*TEMPERATURES, *SECTIONS),
    checks=(f"{TESTS}::test_heat_contents_are_those_of_the_table: to the last digit",),
)
def heat_content_aluminium(
    start_temperature: Annotated[float, nom.start_temperature],
    final_temperature: Annotated[float, nom.final_temperature],
    insulation_section: Annotated[float, nom.insulation_section],
    conductor_section: Annotated[float, nom.conductor_section],
) -> Annotated[float, nom.heat_content]:
    """Mean over the rise, for a kilogram of conductor with its share of insulation."""
    T_s, T_f, A_i, A_c = start_temperature, final_temperature, insulation_section, conductor_section
    return 893 + 0.220 * (T_s + T_f) + 794 * A_i / A_c


@cell(
    title="Heating ratio",
    source=CLAUSE,
    valid_for=(
        Range("start_loss", at_least=0.0),
        Range("duration", above=0.0, at_most=ADIABATIC_TO),
        Range("heat_content", above=0.0),
        Range("start_temperature", **TEMPERATURE),
        Range("temperature_offset", at_least=200.0, at_most=300.0),
    ),
    checks=(f"{TESTS}::test_ratio_of_one_doubles_the_resistance: by the starting loss alone",),
)
def heating_ratio(
    start_loss: Annotated[float, nom.start_loss],
    duration: Annotated[float, nom.duration],
    heat_content: Annotated[float, nom.heat_content],
    start_temperature: Annotated[float, nom.start_temperature],
    temperature_offset: Annotated[float, nom.temperature_offset],
) -> Annotated[float, nom.heating_ratio]:
    """Heat put in at the starting d.c. loss over the heat that would double the resistance."""
    W_s, t, C_h, T_s, T_k = start_loss, duration, heat_content, start_temperature, temperature_offset
    return W_s * t / (C_h * (T_k + T_s))
