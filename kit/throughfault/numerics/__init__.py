"""Own solvers in coherent SI: network, transient, heat. No published formula, no units."""
