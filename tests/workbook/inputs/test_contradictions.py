"""Each contradiction between keys: a change of the whole file, and the whole report."""

import pytest

CASES = {
    "letters and windings": (
        [('"YNd11"', '"YNyn0d11"')],
        ["unit.toml: [line 15] rating.vector_group: names 3 windings, but 2 are given (HV, LV)."],
    ),
    "bank with a three-phase core": (
        [("bank = false", "bank = true")],
        [
            'unit.toml: [line 17] rating.core: is "three-limb", which is a three-phase core, but rating.bank is true; write "single-phase" or "shell".'
        ],
    ),
    "single-phase letters of a three-phase unit": (
        [
            ('"YNd11"', '"Ii0"'),
            ('HV = "5 ohm + 12j ohm"\n', ""),
            ("[neutral.HV]", "[bushings.LV]"),
            ('[zero_sequence]\nat = "HV"\nmagnetising = "55 %"\n', ""),
            ('zero_sequence = "11.2 %"\n', ""),
            ('zero_sequence = "11.5 %"\n', ""),
            ('zero_sequence = "10.9 %"\n', ""),
        ],
        [
            "unit.toml: design.coils: must have turns that follow the voltages within 10 %, got 'HV' over 'LV' -42.3 % off at tapping 'plus'.",
            "unit.toml: [line 15] rating.vector_group: has the letter I of a single-phase unit, but this is a three-phase unit.",
        ],
    ),
    "three-phase letters of a single-phase unit": (
        [("phases = 3", "phases = 1"), ('core = "three-limb"', 'core = "shell"')],
        [
            "unit.toml: [line 15] rating.vector_group: has three-phase letters, but rating.phases is 1 and rating.bank is not true."
        ],
    ),
    "single-phase core of a three-phase unit": (
        [('core = "three-limb"', 'core = "single-phase"')],
        ['unit.toml: [line 17] rating.core: is "single-phase", but rating.phases is 3.'],
    ),
    "three-phase core of a single-phase unit": (
        [("phases = 3", "phases = 1"), ("bank = false", "bank = true")],
        [
            'unit.toml: [line 17] rating.core: is "three-limb", which is a three-phase core, but rating.bank is true; write "single-phase" or "shell".'
        ],
    ),
    "first winding not the highest": (
        [
            ('rated_voltage = "33 kV"', 'rated_voltage = "133 kV"'),
            ('highest_voltage = "36 kV"', 'highest_voltage = "145 kV"'),
            ("[design.core]", "[[x]]"),
        ],
        [
            "unit.toml: x: is not a known key; known here: format, standard, identity, rating, windings, impedances, system, earthing, zero_sequence, tap_changer, bushings, neutral, design, limits, declared.",
            "unit.toml: design.coils: must have turns that follow the voltages within 10 %, got 'HV' over 'LV' +303 % off at tapping 'principal'.",
            "unit.toml: [line 38] windings.LV.rated_voltage: must not be above that of the first winding, 132 kV of 'HV', got 133 kV (IEC 60076-1: high voltage first).",
        ],
    ),
    "names that differ by case": (
        [("[windings.LV]", "[windings.hv]")],
        [
            "unit.toml: [line 36] windings.hv: must differ from 'HV' by more than upper and lower case.",
            "unit.toml: [line 50] impedances[1].between: names 'LV', which is not a winding; known: HV, hv.",
            "unit.toml: [line 61] impedances[2].between: names 'LV', which is not a winding; known: HV, hv.",
            "unit.toml: [line 71] impedances[3].between: names 'LV', which is not a winding; known: HV, hv.",
            "unit.toml: [line 125] design.coils[1].winding: names 'LV', which is not a winding; known: HV, hv.",
            "unit.toml: [line 200] declared.\"duty.LV.peak\": is not a result: 'LV' is not a winding; known: HV, hv, neutral.",
            "unit.toml: [line 201] declared.\"duty.LV.terminal_peak\": is not a result: 'LV' is not a winding; known: HV, hv, neutral.",
        ],
    ),
    "self-cooled power above the rated": (
        [('self_cooled_power = "40 MVA"', 'self_cooled_power = "50 MVA"')],
        ["unit.toml: [line 22] rating.self_cooled_power: must not be above the rated power, 40 MVA, got 50 MVA."],
    ),
    "Um below the rated voltage": (
        [('highest_voltage = "145 kV"', 'highest_voltage = "123 kV"')],
        [
            "unit.toml: [line 28] windings.HV.highest_voltage: must not be below rated_voltage, 132 kV, got 123 kV (Um, IEC 60076-3)."
        ],
    ),
    "principal tapping missing": (
        [('principal = "132 kV", ', "")],
        ['unit.toml: [line 34] windings.HV.tappings: must name the tapping "principal", got plus, minus.'],
    ),
    "principal tapping unlike the rated voltage": (
        [('principal = "132 kV"', 'principal = "130 kV"')],
        ["unit.toml: [line 34] windings.HV.tappings.principal: must be the rated voltage, 132 kV, got 130 kV."],
    ),
    "stabilising star": (
        [
            ('"YNd11"', '"YNyn0"'),
            ("stabilising = false\neddy_share = 0.1\n", "stabilising = true\neddy_share = 0.1\n"),
        ],
        [
            "unit.toml: windings: must have at least two that are brought out; stabilising windings are not.",
            "unit.toml: design.coils: must have turns that follow the voltages within 10 %, got 'HV' over 'LV' -42.3 % off at tapping 'plus'.",
            "unit.toml: [line 42] windings.LV.stabilising: is true, but the vector group YNyn0 does not make 'LV' a delta (IEC 60076-1: a stabilising winding is one).",
        ],
    ),
    "only one winding brought out": (
        [('"YNd11"', '"YN+d11"')],
        ["unit.toml: windings: must have at least two that are brought out; stabilising windings are not."],
    ),
    "row of an unknown winding": (
        [('between = ["LV", "HV"]', 'between = ["LW", "HV"]')],
        ["unit.toml: [line 71] impedances[3].between: names 'LW', which is not a winding; known: HV, LV."],
    ),
    "row of an unknown tapping": (
        [('tapping = "minus"', 'tapping = "minuss"')],
        [
            "unit.toml: [line 72] impedances[3].tapping: is 'minuss', which no winding has (did you mean 'minus'?); known: principal, plus, minus."
        ],
    ),
    "the same row twice": (
        [('tapping = "plus"', 'tapping = "principal"')],
        ["unit.toml: [line 60] impedances[2]: repeats row 1: HV and LV at tapping 'principal'."],
    ),
    "the same row in the other order": (
        [('tapping = "minus"', 'tapping = "principal"')],
        ["unit.toml: [line 70] impedances[3]: repeats row 1: LV and HV at tapping 'principal'."],
    ),
    "resistance above impedance": (
        [('resistance = "0.44 %"', 'resistance = "44 %"')],
        [
            "unit.toml: [line 65] impedances[2].resistance: makes a resistance of 44 %, which must be below the impedance, 12.9 %."
        ],
    ),
    "load loss above impedance": (
        [('load_loss = "180 kW"', 'load_loss = "18 MW"')],
        [
            "unit.toml: [line 54] impedances[1].load_loss: makes a resistance of 45 %, which must be below the impedance, 12.5 %."
        ],
    ),
    "resistance and load loss disagree": (
        [('resistance = "0.49 %"', 'resistance = "0.59 %"')],
        [
            "unit.toml: [line 76] impedances[3].resistance: is 0.59 %, but load_loss over base_power is 0.49 %; give one, or make them agree."
        ],
    ),
    "d.c. above a.c. resistance": (
        [('dc_resistance = "0.38 %"', 'dc_resistance = "0.48 %"')],
        [
            "unit.toml: [line 55] impedances[1].dc_resistance: must not be above the a.c. resistance, 0.45 %, got 0.48 %."
        ],
    ),
    "zero sequence without a path": (
        [
            ('"YNd11"', '"Yd11"'),
            ('HV = "5 ohm + 12j ohm"\n', ""),
            ("[neutral.HV]", "[bushings.LV]"),
            ('[zero_sequence]\nat = "HV"\nmagnetising = "55 %"\n', ""),
            ('zero_sequence = "11.2 %"\n', ""),
            ('zero_sequence = "11.5 %"\n', ""),
        ],
        [
            "unit.toml: [line 76] impedances[3].zero_sequence: must not be given where no path exists: between 'LV' and 'HV' of Yd11 no zero-sequence current can flow."
        ],
    ),
    "zero sequence of a single-phase unit": (
        [
            ('"YNd11"', '"Ii0"'),
            ("phases = 3", "phases = 1"),
            ('core = "three-limb"', 'core = "shell"'),
            ('HV = "5 ohm + 12j ohm"\n', ""),
            ("[neutral.HV]", "[bushings.LV]"),
            ('[zero_sequence]\nat = "HV"\nmagnetising = "55 %"\n', ""),
            ('zero_sequence = "11.2 %"\n', ""),
            ('zero_sequence = "11.5 %"\n', ""),
            (
                'blocks = [ { bottom = "90 mm", top = "1610 mm", turns = 402',
                'blocks = [ { bottom = "90 mm", top = "1610 mm", turns = 232',
            ),
        ],
        [
            "unit.toml: [line 76] impedances[3].zero_sequence: must not be given for a single-phase unit, which has no zero sequence."
        ],
    ),
    "magnetising impedance of an unknown winding": (
        [('at = "HV"', 'at = "HW"')],
        ["unit.toml: [line 98] zero_sequence.at: names 'HW', which is not a winding; known: HV, LV."],
    ),
    "magnetising impedance of a delta": (
        [('at = "HV"', 'at = "LV"')],
        [
            "unit.toml: [line 98] zero_sequence.at: names 'LV', which has no neutral in YNd11: no zero-sequence current can enter."
        ],
    ),
    "network at an unknown winding": (
        [("[system.HV]", "[system.HW]")],
        ["unit.toml: [line 84] system.HW: is not a winding; known: HV, LV, prefault_voltage."],
    ),
    "network at a stabilising winding": (
        [('"YNd11"', '"YN+d11"'), ("[system.HV]", "[system.LV]")],
        [
            "unit.toml: windings: must have at least two that are brought out; stabilising windings are not.",
            "unit.toml: [line 86] system.LV.short_circuit_power: must not be given: 'LV' is a stabilising winding, its terminals are not brought out.",
        ],
    ),
    "exclusion that excludes nothing": (
        [("x_over_r = 12.0", 'x_over_r = 12.0\nterminal_fault_excluded = "no terminals"')],
        [
            "unit.toml: [line 89] system.HV.terminal_fault_excluded: holds for the stabilising winding of a bank only; other terminals are always faulted."
        ],
    ),
    "table without Um": (
        [
            ('short_circuit_power = "10000 MVA"', 'short_circuit_power = "table"'),
            ('highest_voltage = "145 kV"\n', ""),
        ],
        ['unit.toml: [line 85] system.HV.short_circuit_power: is "table", which needs windings.HV.highest_voltage.'],
    ),
    "column without table": (
        [("x_over_r = 12.0", 'x_over_r = 12.0\ncolumn = "european"')],
        ['unit.toml: [line 89] system.HV.column: holds for short_circuit_power = "table" only.'],
    ),
    "network keys without a fault level": (
        [('short_circuit_power = "10000 MVA"\n', "")],
        [
            "unit.toml: [line 86] system.HV.short_circuit_power_minimum: needs system.HV.short_circuit_power beside it.",
            "unit.toml: [line 87] system.HV.x_over_r: needs system.HV.short_circuit_power beside it.",
            "unit.toml: [line 88] system.HV.x0_over_x1: needs system.HV.short_circuit_power beside it.",
            "unit.toml: [line 89] system.HV.peak_factor: needs system.HV.short_circuit_power beside it.",
            "unit.toml: [line 90] system.HV.out_of_phase: needs system.HV.short_circuit_power beside it.",
            "unit.toml: [line 91] system.HV.series_reactance: needs system.HV.short_circuit_power beside it.",
        ],
    ),
    "lowest fault level above the highest": (
        [('short_circuit_power_minimum = "4000 MVA"', 'short_circuit_power_minimum = "40 GVA"')],
        [
            "unit.toml: [line 87] system.HV.short_circuit_power_minimum: must not be above short_circuit_power, 10000 MVA, got 40 GVA."
        ],
    ),
    "prefault voltage of an unknown tapping": (
        [("{ minus = 1.1 }", "{ minos = 1.1 }")],
        [
            "unit.toml: [line 82] system.prefault_voltage: names 'minos', which is not a tapping (did you mean 'minus'?); known: principal, plus, minus."
        ],
    ),
    "earthing of an unknown winding": (
        [('HV = "5 ohm + 12j ohm"', 'HW = "solid"')],
        ["unit.toml: [line 95] earthing.HW: is not a winding; known: HV, LV."],
    ),
    "earthed delta": (
        [('HV = "5 ohm + 12j ohm"', 'HV = "5 ohm + 12j ohm"\nLV = "solid"')],
        [
            "unit.toml: [line 96] earthing.LV: must not be given: 'LV' is a delta in YNd11, which has no neutral to earth."
        ],
    ),
    "earthed star without a neutral": (
        [
            ('"YNd11"', '"Yd11"'),
            ("[neutral.HV]", "[bushings.LV]"),
            ('[zero_sequence]\nat = "HV"\nmagnetising = "55 %"\n', ""),
            ('zero_sequence = "11.2 %"\n', ""),
            ('zero_sequence = "11.5 %"\n', ""),
            ('zero_sequence = "10.9 %"\n', ""),
        ],
        ["unit.toml: [line 92] earthing.HV: must not be given: the neutral of 'HV' is not brought out in Yd11."],
    ),
    "peak below rms": (
        [('peak_current = "15 kA"', 'peak_current = "5 kA"')],
        ["unit.toml: [line 104] tap_changer.peak_current: must not be below short_time_current, 6 kA, got 5 kA."],
    ),
    "bushing of an unknown winding": (
        [("[bushings.HV]", "[bushings.HW]")],
        ["unit.toml: [line 106] bushings.HW: is not a winding; known: HV, LV."],
    ),
    "neutral lead of an unknown winding": (
        [("[neutral.HV]", "[neutral.HW]")],
        ["unit.toml: [line 111] neutral.HW: is not a winding; known: HV, LV."],
    ),
    "neutral lead of a delta": (
        [("[neutral.HV]", "[neutral.LV]")],
        [
            "unit.toml: [line 111] neutral.LV: must not be given: 'LV' is a delta in YNd11, which has no neutral to earth."
        ],
    ),
    "declared result of an unknown family": (
        [('"duty.LV.peak"', '"dutty.LV.peak"')],
        [
            "unit.toml: [line 200] declared.\"dutty.LV.peak\": is not a result: 'dutty' is no family of results (did you mean 'duty'?); known: duty, thermal, field, force, strength, dynamic, apparatus, impedance, test, similar, spread, headroom."
        ],
    ),
    "declared result of an unknown winding": (
        [('"duty.LV.peak"', '"duty.LW.peak"')],
        [
            "unit.toml: [line 200] declared.\"duty.LW.peak\": is not a result: 'LW' is not a winding; known: HV, LV, neutral."
        ],
    ),
    "declared result in another unit": (
        [('"duty.LV.peak" = "8.0 kA"', '"duty.LV.peak" = "8.0 kN"')],
        [
            "unit.toml: [line 200] declared.\"duty.LV.peak\": must be a current (unit one of mA, A, kA) for 'duty.LV.peak', got 8 kN."
        ],
    ),
    "declared safety in a unit": (
        [('"strength.LV.buckling" = 2.2', '"strength.LV.buckling" = "2.2 kN"')],
        [
            "unit.toml: [line 202] declared.\"strength.LV.buckling\": must be a bare number for 'strength.LV.buckling', got 2.2 kN."
        ],
    ),
    "limit of an unknown coil": (
        [('"strength.LV.hoop" =', '"strength.LW.hoop" =')],
        ["unit.toml: [line 196] limits.\"strength.LW.hoop\": is not a result: 'LW' is not a coil; known: LV, HV, RW."],
    ),
    "limit in another unit": (
        [("value = 1.8", 'value = "1.8 MPa"')],
        [
            "unit.toml: [line 197] limits.\"strength.LV.buckling\".value: must be a bare number for 'strength.LV.buckling', got 1.8 MPa."
        ],
    ),
    "share of Rp0.2 for something else": (
        [("value = 1.8", 'value = "0.35 Rp0.2"')],
        [
            "unit.toml: [line 197] limits.\"strength.LV.buckling\".value: is a share of Rp0.2, but 'strength.LV.buckling' is of kind number."
        ],
    ),
    "share of Rp0.2 for apparatus": (
        [('"strength.LV.buckling" = { value = 1.8', '"apparatus.bushings.HV.peak_current" = { value = "0.35 Rp0.2"')],
        [
            "unit.toml: [line 197] limits.\"apparatus.bushings.HV.peak_current\".value: is a share of Rp0.2, but 'apparatus.bushings.HV.peak_current' is of kind current."
        ],
    ),
    "share of Rp0.2 for an unknown result": (
        [('"strength.LV.buckling" = { value = 1.8', '"strength.LV.bukling" = { value = "0.35 Rp0.2"')],
        [
            "unit.toml: [line 197] limits.\"strength.LV.bukling\".value: is a share of Rp0.2, but 'strength.LV.bukling' is of kind unknown."
        ],
    ),
    "limit of apparatus in another unit": (
        [('"strength.LV.buckling" = { value = 1.8', '"apparatus.bushings.HV.peak_current" = { value = "12 kV"')],
        [
            "unit.toml: [line 197] limits.\"apparatus.bushings.HV.peak_current\".value: must be a current (unit one of mA, A, kA) for 'apparatus.bushings.HV.peak_current', got 12 kV."
        ],
    ),
    "limit of an unknown apparatus": (
        [('"strength.LV.buckling" = { value = 1.8', '"apparatus.bushing.HV.peak_current" = { value = "12 kA"')],
        [
            "unit.toml: [line 197] limits.\"apparatus.bushing.HV.peak_current\": is not a result: 'bushing' is no apparatus (did you mean 'bushings'?); known: tap_changer, bushings, neutral."
        ],
    ),
    "limit of apparatus at an unknown winding": (
        [('"strength.LV.buckling" = { value = 1.8', '"apparatus.neutral.HW.peak_current" = { value = "12 kA"')],
        [
            "unit.toml: [line 197] limits.\"apparatus.neutral.HW.peak_current\": is not a result: 'HW' is not a winding; known: HV, LV."
        ],
    ),
    "limit of something apparatus is not proven for": (
        [('"strength.LV.buckling" = { value = 1.8', '"apparatus.tap_changer.peak" = { value = "12 kA"')],
        [
            "unit.toml: [line 197] limits.\"apparatus.tap_changer.peak\": is not a result: 'peak' is nothing apparatus is proven for; known: short_time_current, peak_current."
        ],
    ),
    "tolerance below the resistance": (
        [('load_loss = "180 kW"', 'load_loss = "4.7 MW"'), ('dc_resistance = "0.38 %"\n', "")],
        [
            "unit.toml: [line 57] impedances[1].tolerance: leaves an impedance of 11.56 %, which must be above the resistance, 11.75 %, got 7.5 %."
        ],
    ),
    "limit of a neutral current in another unit": (
        [('"strength.LV.buckling" = { value = 1.8', '"duty.neutral.HV" = { value = 1.8')],
        [
            "unit.toml: [line 197] limits.\"duty.neutral.HV\".value: must be a current (unit one of mA, A, kA) for 'duty.neutral.HV', got 1.8."
        ],
    ),
    "winding without turns at a tapping": (
        [("minus = -93 }", "minus = -928 }")],
        ["unit.toml: design.coils: must give 'HV' turns at every tapping, got 0 in series at 'minus'."],
    ),
    "turns against the voltages": (
        [("turns = 402", "turns = 320")],
        [
            "unit.toml: design.coils: must have turns that follow the voltages within 10 %, got 'HV' over 'LV' +25.6 % off at tapping 'principal'."
        ],
    ),
    "the same coil name twice": (
        [('name = "RW"', 'name = "lv"')],
        ["unit.toml: [line 169] design.coils[3].name: repeats the name of coil 1, 'LV'."],
    ),
    "coils that overlap": (
        [('inner_radius = "540 mm"', 'inner_radius = "490 mm"')],
        ["unit.toml: [line 168] design.coils[3]: overlaps coil 'HV' by 10 mm in radius and 250 mm in height."],
    ),
    "neighbouring limbs that overlap": (
        [('axis_spacing = "1300 mm"', 'axis_spacing = "1150 mm"')],
        [
            "unit.toml: [line 120] design.core.axis_spacing: must be at least twice the largest outer radius, 1200 mm, got 1150 mm."
        ],
    ),
    "clamping share of an unknown coil": (
        [("clamping_share = { LV = 0.5, HV = 0.5 }", "clamping_share = { LW = 0.5, HV = 0.5 }")],
        ["unit.toml: [line 185] design.clamping.clamping_share: names 'LW', which is not a coil; known: LV, HV, RW."],
    ),
    "clamping shares that do not add up": (
        [("clamping_share = { LV = 0.5, HV = 0.5 }", "clamping_share = { LV = 0.5, HV = 0.4 }")],
        ["unit.toml: [line 185] design.clamping.clamping_share: must add up to 1, got 0.9."],
    ),
    "ring inside out": (
        [('ring_outer_radius = "620 mm"', 'ring_outer_radius = "29 cm"')],
        [
            "unit.toml: [line 187] design.clamping.ring_outer_radius: must be above ring_inner_radius, 300 mm, got 29 cm."
        ],
    ),
    "half of what is not a zigzag": (
        [('name = "RW"', 'name = "RW"\nhalf = 1')],
        ["unit.toml: [line 170] design.coils[3].half: must not be given: 'HV' is not a zigzag winding."],
    ),
    "zigzag without halves": (
        [
            ('"YNd11"', '"YNz11"'),
            ("turns = 402", "turns = 268"),
            ('zero_sequence = "11.2 %"\n', ""),
            ('zero_sequence = "11.5 %"\n', ""),
            ('zero_sequence = "10.9 %"\n', ""),
        ],
        ["unit.toml: [line 120] design.coils[1].half: must be 1 or 2: 'LV' is a zigzag winding."],
    ),
    "coil of an unknown winding": (
        [('name = "RW"\nwinding = "HV"', 'name = "RW"\nwinding = "HW"')],
        ["unit.toml: [line 170] design.coils[3].winding: names 'HW', which is not a winding; known: HV, LV."],
    ),
    "materials that disagree": (
        [('conductor_material = "copper"', 'conductor_material = "aluminium"')],
        [
            'unit.toml: [line 160] design.coils[2].conductor.material: is "copper", but windings.HV.conductor_material is "aluminium".',
            'unit.toml: [line 177] design.coils[3].conductor.material: is "copper", but windings.HV.conductor_material is "aluminium".',
        ],
    ),
    "coil without a build": (
        [('outer_radius = "370 mm"', 'outer_radius = "310 mm"')],
        ["unit.toml: [line 128] design.coils[1].outer_radius: must be above inner_radius, 310 mm, got 310 mm."],
    ),
    "coil inside the limb": (
        [('limb_diameter = "560 mm"', 'limb_diameter = "660 mm"')],
        [
            "unit.toml: [line 127] design.coils[1].inner_radius: must be outside the limb, half of limb_diameter 660 mm, got 310 mm."
        ],
    ),
    "block upside down": (
        [('bottom = "600 mm", top = "1100 mm"', 'bottom = "1100 mm", top = "600 mm"')],
        ["unit.toml: [line 174] design.coils[3].blocks[1]: must have its top above its bottom, 1100 mm, got 600 mm."],
    ),
    "block outside the window": (
        [('window_height = "1700 mm"', 'window_height = "1600 mm"')],
        [
            "unit.toml: [line 130] design.coils[1].blocks[1]: must end within the window, 1600 mm, got top 1610 mm.",
            "unit.toml: [line 157] design.coils[2].blocks[2]: must end within the window, 1600 mm, got top 1610 mm.",
        ],
    ),
    "blocks that overlap": (
        [('{ bottom = "850 mm"', '{ bottom = "800 mm"')],
        ["unit.toml: [line 157] design.coils[2].blocks[2]: overlaps block 1 in height."],
    ),
    "turns of an unknown tapping": (
        [("plus = 46, ", "pluss = 46, ")],
        [
            "unit.toml: [line 174] design.coils[3].blocks[1].turns: names 'pluss', which is not a tapping (did you mean 'plus'?); known: principal, plus, minus.",
            "unit.toml: [line 174] design.coils[3].blocks[1].turns: must name every tapping; missing: plus.",
        ],
    ),
    "strip of two strands": (
        [("strands = 1\n", "strands = 2\n")],
        ['unit.toml: [line 136] design.coils[1].conductor.strands: must be 1 for a conductor of kind "strip", got 2.'],
    ),
    "transposed cable without its strands": (
        [
            (
                'kind = "strip"\nmaterial = "copper"\nstrand_radial = "2.6 mm"\nstrand_axial = "13 mm"\nstrands = 1\n',
                'kind = "transposed"\nmaterial = "copper"\nstrand_radial = "2.6 mm"\nstrand_axial = "13 mm"\n',
            )
        ],
        [
            'unit.toml: [line 131] design.coils[1].conductor.strands: is missing; a conductor of kind "transposed" must state the strands of one cable.'
        ],
    ),
    "sticks wider than the circumference": (
        [('stick_width = "30 mm"', 'stick_width = "90 mm"')],
        [
            "unit.toml: [line 144] design.coils[1].supports.stick_width: times 24 must not exceed the inner circumference, 1948 mm, got 90 mm."
        ],
    ),
    "spacers wider than the circumference": (
        [('spacer_width = "40 mm"', 'spacer_width = "90 mm"')],
        [
            "unit.toml: [line 147] design.coils[1].supports.spacer_width: times 24 must not exceed the inner circumference, 1948 mm, got 90 mm."
        ],
    ),
}


@pytest.mark.parametrize("name", CASES)
def test_the_whole_message(name, refused):
    """A contradiction is refused with both of its sides."""
    edits, faults = CASES[name]
    assert refused(*edits) == faults
