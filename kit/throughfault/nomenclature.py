"""Every symbol used by more than one cell: term, letter, unit.

Terms follow IEC 60050 and the IEC 60076 series. A temperature is in degC, a temperature rise or a
temperature offset in K, and they are different symbols.
"""

from throughfault.declare import Symbol

rated_power = Symbol("rated_power", "S_r", "MVA", "rated power")
rated_voltage = Symbol("rated_voltage", "U_r", "kV", "rated voltage, or tapping voltage on another tapping")
rated_current = Symbol("rated_current", "I_r", "A", "rated current")
base_power = Symbol("base_power", "S_b", "MVA", "power that a per cent value refers to")
load_loss = Symbol("load_loss", "P_k", "kW", "load loss at the base power")

# impedances
impedance_ratio = Symbol("impedance_ratio", "z_t", "%", "short-circuit impedance of the tapping considered")
resistance_ratio = Symbol("resistance_ratio", "r_t", "%", "resistance of the short-circuit impedance")
reactance_ratio = Symbol("reactance_ratio", "x_t", "%", "reactance of the short-circuit impedance")
rated_impedance_ratio = Symbol("rated_impedance_ratio", "z_r", "%", "short-circuit impedance on the rated power")
impedance_tolerance = Symbol("impedance_tolerance", r"\Delta z", "%", "tolerance of a guaranteed impedance")
least_impedance_ratio = Symbol("least_impedance_ratio", r"z_{\min}", "%", "impedance less its tolerance")
transformer_impedance = Symbol("transformer_impedance", "Z_t", "ohm", "impedance of the transformer, per phase")
system_impedance = Symbol("system_impedance", "Z_s", "ohm", "impedance of the system, per phase")
system_share = Symbol("system_share", r"Z_s/Z_t", "%", "impedance of the system over that of the transformer")
system_resistance = Symbol("system_resistance", "R_s", "ohm", "resistance of the system, per phase")
system_reactance = Symbol("system_reactance", "X_s", "ohm", "reactance of the system, per phase")
transformer_resistance = Symbol("transformer_resistance", "R_t", "ohm", "resistance of the transformer, per phase")
transformer_reactance = Symbol("transformer_reactance", "X_t", "ohm", "reactance of the transformer, per phase")
resistance_1 = Symbol("resistance_1", "R_1", "ohm", "positive-sequence resistance at the fault")
reactance_1 = Symbol("reactance_1", "X_1", "ohm", "positive-sequence reactance at the fault")
resistance_0 = Symbol("resistance_0", "R_0", "ohm", "zero-sequence resistance at the fault")
reactance_0 = Symbol("reactance_0", "X_0", "ohm", "zero-sequence reactance at the fault")
resistance_parallel = Symbol("resistance_parallel", "R_p", "ohm", "resistance of two sequences in parallel")
reactance_parallel = Symbol("reactance_parallel", "X_p", "ohm", "reactance of two sequences in parallel")
impedance_angle = Symbol("impedance_angle", r"\varphi", "rad", "angle of the impedance of the faulted circuit")
x_over_r = Symbol("x_over_r", "X/R", "1", "reactance over resistance of the faulted circuit")
system_x_over_r = Symbol("system_x_over_r", "X_s/R_s", "1", "reactance over resistance of the system")

# currents
system_voltage = Symbol("system_voltage", "U_s", "kV", "rated voltage of the system")
short_circuit_power = Symbol("short_circuit_power", "S", "MVA", "short-circuit apparent power of the system")
fault_voltage = Symbol("fault_voltage", "U", "kV", "voltage between lines before the fault")
symmetrical_current = Symbol("symmetrical_current", "I", "kA", "symmetrical short-circuit current, r.m.s.")
earth_current = Symbol("earth_current", "3I_0", "kA", "current to earth at the fault, r.m.s.")
winding_current = Symbol("winding_current", "I_w", "kA", "current in the winding, r.m.s.")
peak_current = Symbol("peak_current", r"\hat{\imath}", "kA", "first peak of the short-circuit current")
peak_factor = Symbol("peak_factor", r"k\sqrt{2}", "1", "first peak over the r.m.s. symmetrical current")
current_multiple = Symbol("current_multiple", "N", "1", "symmetrical current over rated or base current")
frequency = Symbol("frequency", "f", "Hz", "rated frequency")
offset_time_constant = Symbol("offset_time_constant", r"\tau", "s", "time constant of the offset")

# heat
current_density = Symbol("current_density", "J", "A/mm^2", "symmetrical short-circuit current over conductor section")
conductor_section = Symbol("conductor_section", "A_c", "mm^2", "bare section of one turn, all parallel conductors")
insulation_section = Symbol("insulation_section", "A_i", "mm^2", "section of the insulation of one turn")
duration = Symbol("duration", "t", "s", "duration of the fault")
permissible_duration = Symbol("permissible_duration", r"t_{\max}", "s", "duration at which the limit is reached")
heat_integral = Symbol("heat_integral", "H", "A^2 s/mm^4", "integral of the squared current density")
thermal_constant = Symbol("thermal_constant", "C", "A^2 s/mm^4", "thermal constant of the conductor material")
temperature_offset = Symbol("temperature_offset", "T_k", "K", "offset at which the resistance is proportional to T")
initial_temperature = Symbol("initial_temperature", r"\theta_0", "degC", "winding temperature when the fault begins")
average_temperature = Symbol("average_temperature", r"\theta_1", "degC", "average winding temperature after the fault")
conductor_temperature = Symbol("conductor_temperature", r"\theta", "degC", "conductor temperature after the fault")
permitted_temperature = Symbol("permitted_temperature", r"\theta_2", "degC", "permitted temperature")
reference_temperature = Symbol("reference_temperature", "T_r", "degC", "temperature that losses are referred to")
eddy_share = Symbol("eddy_share", "e_r", "1", "eddy loss over d.c. loss at the reference temperature")
start_eddy_share = Symbol("start_eddy_share", "e", "1", "eddy loss over d.c. loss when the fault begins")
start_temperature = Symbol("start_temperature", "T_s", "degC", "conductor temperature when the fault begins")
final_temperature = Symbol("final_temperature", "T_f", "degC", "conductor temperature after the fault")
start_loss = Symbol("start_loss", "W_s", "W/kg", "d.c. loss per mass of conductor when the fault begins")
heat_content = Symbol("heat_content", "C_h", "W s/(kg K)", "heat content of conductor and insulation")
heating_ratio = Symbol(
    "heating_ratio", "m", "1", "heat put in at the starting loss over heat that doubles the resistance"
)
relative_rise = Symbol("relative_rise", "r", "1", "rise over the temperature at the start above zero resistance")
resistivity_20 = Symbol("resistivity_20", r"\rho_{20}", "uohm m", "resistivity at the temperature of the index")
density = Symbol("density", r"\gamma", "kg/m^3", "density of the conductor")
cooling_time_constant = Symbol("cooling_time_constant", r"\tau_w", "s", "time constant of winding to liquid")
dead_time = Symbol("dead_time", r"\Delta t", "s", "time without current between two faults")
start_above_zero_resistance = Symbol(
    "start_above_zero_resistance", "y_0", "K", "initial temperature above that of zero resistance"
)
reference_above_zero_resistance = Symbol(
    "reference_above_zero_resistance", "y_r", "K", "reference temperature above that of zero resistance"
)
temperature_before_next_shot = Symbol(
    "temperature_before_next_shot", r"\theta_0'", "degC", "temperature when the next fault begins"
)

# network fault levels
voltage_factor = Symbol("voltage_factor", "c", "1", "voltage factor of the network calculation")
impedance_correction = Symbol("impedance_correction", "K_T", "1", "correction of a transformer's impedance")

# through faults
fault_impedance = Symbol("fault_impedance", "Z", "p.u.", "impedance that bounds the current, on the base of N")
mechanical_share = Symbol("mechanical_share", "s", "%", "current over its maximum from which mechanical effects count")

# autotransformers and three windings
impedance_12 = Symbol("impedance_12", "z_{12}", "%", "impedance of the pair, on the common base")
impedance_13 = Symbol("impedance_13", "z_{13}", "%", "impedance of the pair, on the common base")
impedance_23 = Symbol("impedance_23", "z_{23}", "%", "impedance of the pair, on the common base")
star_leg = Symbol("star_leg", "z_1", "%", "leg of the equivalent star, on the common base")
high_voltage = Symbol("high_voltage", "U_H", "kV", "voltage of the high-voltage terminal")
low_voltage = Symbol("low_voltage", "U_X", "kV", "voltage of the low-voltage terminal")
high_voltage_current = Symbol("high_voltage_current", "I_H", "A", "rated current of the high-voltage terminal")
low_voltage_current = Symbol("low_voltage_current", "I_X", "A", "rated current of the low-voltage terminal")
auto_ratio = Symbol("auto_ratio", "q", "1", "high voltage over voltage of the series winding")
terminal_impedance_hx = Symbol("terminal_impedance_hx", "z_{HX}", "%", "impedance between the line terminals")
terminal_impedance_ht = Symbol("terminal_impedance_ht", "z_{HT}", "%", "impedance of high voltage to tertiary")
terminal_impedance_xt = Symbol("terminal_impedance_xt", "z_{XT}", "%", "impedance of low voltage to tertiary")
series_common_impedance = Symbol("series_common_impedance", "z_{SC}", "%", "impedance of series to common winding")
series_tertiary_impedance = Symbol(
    "series_tertiary_impedance", "z_{ST}", "%", "impedance of series winding to tertiary"
)
