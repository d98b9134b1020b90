"""Every symbol used by more than one cell: term, letter, unit.

Terms follow IEC 60050 and the IEC 60076 series. A temperature is in degC, a temperature rise in K,
and they are different symbols.
"""

from throughfault.declare.symbol import Symbol

rated_power = Symbol("rated_power", "S_r", "MVA", "rated power")
rated_voltage = Symbol("rated_voltage", "U_r", "kV", "rated voltage, or tapping voltage on another tapping")
rated_current = Symbol("rated_current", "I_r", "A", "rated current")
impedance_ratio = Symbol("impedance_ratio", "z_t", "%", "short-circuit impedance of the tapping considered")
transformer_impedance = Symbol("transformer_impedance", "Z_t", "ohm", "impedance of the transformer, per phase")
system_impedance = Symbol("system_impedance", "Z_s", "ohm", "impedance of the system, per phase")
system_voltage = Symbol("system_voltage", "U_s", "kV", "rated voltage of the system")
short_circuit_power = Symbol("short_circuit_power", "S", "MVA", "short-circuit apparent power of the system")
symmetrical_current = Symbol("symmetrical_current", "I", "kA", "symmetrical short-circuit current, r.m.s.")
peak_current = Symbol("peak_current", r"\hat{\imath}", "kA", "first peak of the short-circuit current")
peak_factor = Symbol("peak_factor", r"k\sqrt{2}", "1", "first peak over the r.m.s. symmetrical current")
impedance_angle = Symbol("impedance_angle", r"\varphi", "rad", "angle of the impedance of the faulted circuit")
x_over_r = Symbol("x_over_r", "X/R", "1", "reactance over resistance of the faulted circuit")
current_density = Symbol("current_density", "J", "A/mm^2", "symmetrical short-circuit current over conductor section")
conductor_section = Symbol("conductor_section", "A_c", "mm^2", "bare section of one turn, all parallel conductors")
duration = Symbol("duration", "t", "s", "duration of the fault")
initial_temperature = Symbol("initial_temperature", r"\theta_0", "degC", "winding temperature when the fault begins")
average_temperature = Symbol("average_temperature", r"\theta_1", "degC", "average winding temperature after the fault")
