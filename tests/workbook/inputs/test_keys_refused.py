"""Each fault of a single key: one change of the whole file, and the whole report."""

import pytest

CASES = {
    "unknown key": (
        [('rated_voltage = "132 kV"\n', 'rated_voltage = "132 kV"\nconductor_secton = "62 mm^2"\n')],
        ["unit.toml: [line 28] windings.HV.conductor_secton: is not a known key (did you mean 'conductor_section'?)."],
    ),
    "unknown table": (
        [("[tap_changer]", "[tapchanger]")],
        ["unit.toml: [line 101] tapchanger: is not a known key (did you mean 'tap_changer'?)."],
    ),
    "unknown key without a near one": (
        [("limbs = 3\n", "limbs = 3\nqqq = 1\n")],
        [
            "unit.toml: [line 118] design.core.qqq: is not a known key; known here: limbs, limb_diameter, window_height, axis_spacing, tank_distance."
        ],
    ),
    "missing key": (
        [('rated_voltage = "132 kV"\n', "")],
        [
            'unit.toml: [line 25] windings.HV.rated_voltage: is missing; it must be a voltage such as "1 kV" (unit one of V, kV); source: rating plate.'
        ],
    ),
    "missing word": (
        [('immersion = "oil"\n', "")],
        ['unit.toml: [line 12] rating.immersion: is missing; it must be one of "oil", "dry"; source: rating plate.'],
    ),
    "missing unit": (
        [('rated_voltage = "132 kV"', 'rated_voltage = "132"')],
        [
            "unit.toml: [line 27] windings.HV.rated_voltage: must be a voltage such as \"1 kV\" (unit one of V, kV), got '132' without a unit; source: rating plate."
        ],
    ),
    "bare number for a quantity": (
        [('rated_voltage = "132 kV"', "rated_voltage = 132")],
        [
            'unit.toml: [line 27] windings.HV.rated_voltage: must be a voltage such as "1 kV" (unit one of V, kV), got 132; source: rating plate.'
        ],
    ),
    "unknown unit": (
        [('rated_voltage = "132 kV"', 'rated_voltage = "132 KV"')],
        [
            "unit.toml: [line 27] windings.HV.rated_voltage: must be a voltage such as \"1 kV\" (unit one of V, kV), got '132 KV' with unknown unit 'KV' (did you mean 'kV'?); source: rating plate."
        ],
    ),
    "wrong kind of unit": (
        [('rated_voltage = "132 kV"', 'rated_voltage = "132 MVA"')],
        [
            "unit.toml: [line 27] windings.HV.rated_voltage: must be a voltage such as \"1 kV\" (unit one of V, kV), got '132 MVA', which is of kind apparent power; source: rating plate."
        ],
    ),
    "power for apparent power": (
        [('base_power = "40 MVA"', 'base_power = "40 MW"')],
        [
            "unit.toml: [line 53] impedances[1].base_power: must be an apparent power such as \"1 MVA\" (unit one of VA, kVA, MVA, GVA), got '40 MW', which is of kind power; source: routine test report or rating plate."
        ],
    ),
    "negative quantity": (
        [('conductor_section = "62 mm^2"', 'conductor_section = "-62 mm^2"')],
        [
            "unit.toml: [line 30] windings.HV.conductor_section: must be a positive area, got '-62 mm^2'; source: maker's design sheet."
        ],
    ),
    "zero impedance": (
        [('impedance = "12.5 %"', 'impedance = "0 %"')],
        [
            "unit.toml: [line 52] impedances[1].impedance: must be a ratio above 0 to 1000 %, got '0 %'; source: routine test report or rating plate."
        ],
    ),
    "negative mass of insulation": (
        [('insulation_section = "40 mm^2"', 'insulation_section = "-1 mm^2"')],
        [
            "unit.toml: [line 33] windings.HV.insulation_section: must be zero or a positive area, got '-1 mm^2'; source: maker's design sheet."
        ],
    ),
    "temperature out of range": (
        [('start_temperature = "105 degC"', 'start_temperature = "1050 degC"')],
        [
            "unit.toml: [line 20] rating.start_temperature: must be a temperature above -60 to 400 degC, got '1050 degC'; source: standard or type test report."
        ],
    ),
    "quantity too large": (
        [('rated_power = "40 MVA"', 'rated_power = "4e12 MVA"')],
        [
            "unit.toml: [line 26] windings.HV.rated_power: must be an apparent power from 1e-09 to 1e+09 MVA, got '4e12 MVA'; source: rating plate."
        ],
    ),
    "quantity that overflows": (
        [('rated_power = "40 MVA"', 'rated_power = "4e999 MVA"')],
        [
            "unit.toml: [line 26] windings.HV.rated_power: must be an apparent power such as \"1 MVA\" (unit one of VA, kVA, MVA, GVA), finite, got '4e999 MVA'; source: rating plate."
        ],
    ),
    "quantity as an expression": (
        [('impedance = "12.5 %"', 'impedance = "9**9**9 %"')],
        [
            "unit.toml: [line 52] impedances[1].impedance: must be a ratio such as \"1 %\" (unit one of %, p.u.), got '9**9**9 %'; source: routine test report or rating plate."
        ],
    ),
    "table for a quantity": (
        [('impedance = "12.5 %"', "impedance = { value = 12.5 }")],
        [
            'unit.toml: [line 52] impedances[1].impedance: must be a ratio such as "1 %" (unit one of %, p.u.), got a table; source: routine test report or rating plate.'
        ],
    ),
    "array for a quantity": (
        [('impedance = "12.5 %"', "impedance = [12.5]")],
        [
            'unit.toml: [line 52] impedances[1].impedance: must be a ratio such as "1 %" (unit one of %, p.u.), got an array; source: routine test report or rating plate.'
        ],
    ),
    "date for a quantity": (
        [('impedance = "12.5 %"', "impedance = 2031-02-01")],
        [
            'unit.toml: [line 52] impedances[1].impedance: must be a ratio such as "1 %" (unit one of %, p.u.), got 2031-02-01; source: routine test report or rating plate.'
        ],
    ),
    "not a number": (
        [("x_over_r = 12.0", "x_over_r = nan")],
        [
            "unit.toml: [line 88] system.HV.x_over_r: must be a number above 0 to 1000, without a unit, got nan; source: network operator."
        ],
    ),
    "infinity": (
        [("x_over_r = 12.0", "x_over_r = inf")],
        [
            "unit.toml: [line 88] system.HV.x_over_r: must be a number above 0 to 1000, without a unit, got inf; source: network operator."
        ],
    ),
    "quantity for a ratio": (
        [("x_over_r = 12.0", 'x_over_r = "12"')],
        [
            "unit.toml: [line 88] system.HV.x_over_r: must be a number above 0 to 1000, without a unit, got '12'; source: network operator."
        ],
    ),
    "truth for a ratio": (
        [("x_over_r = 12.0", "x_over_r = true")],
        [
            "unit.toml: [line 88] system.HV.x_over_r: must be a number above 0 to 1000, without a unit, got true; source: network operator."
        ],
    ),
    "fraction for a count": (
        [("sticks = 24", "sticks = 24.0")],
        [
            "unit.toml: [line 143] design.coils[1].supports.sticks: must be a whole number from 1 to 100000, got 24.0; source: maker's design sheet."
        ],
    ),
    "count out of range": (
        [("sticks = 24", "sticks = 0")],
        [
            "unit.toml: [line 143] design.coils[1].supports.sticks: must be a whole number from 1 to 100000, got 0; source: maker's design sheet."
        ],
    ),
    "count of thousands of digits": (
        [
            (
                "sticks = 24",
                "sticks = 0xffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffffff",
            )
        ],
        [
            "unit.toml: [line 143] design.coils[1].supports.sticks: must be a whole number from 1 to 100000, got a whole number of more than 64 digits; source: maker's design sheet."
        ],
    ),
    "word for truth": (
        [("bank = false", 'bank = "no"')],
        ["unit.toml: [line 18] rating.bank: must be true or false, got 'no'; source: rating plate."],
    ),
    "unknown word": (
        [('core = "three-limb"', 'core = "three limb"')],
        [
            'unit.toml: [line 17] rating.core: must be one of "three-limb", "five-limb", "shell", "single-phase", got \'three limb\' (did you mean \'three-limb\'?); source: maker\'s outline or design sheet.'
        ],
    ),
    "word for phases": (
        [("phases = 3", "phases = 2")],
        ["unit.toml: [line 13] rating.phases: must be one of 1, 3, got 2; source: rating plate."],
    ),
    "unknown format": (
        [("throughfault-unit/1", "throughfault-unit/2")],
        [
            "unit.toml: [line 1] format: must be one of \"throughfault-unit/1\", got 'throughfault-unit/2' (did you mean 'throughfault-unit/1'?)."
        ],
    ),
    "unknown standard": (
        [('"IEC 60076-5:2006"\n', '"IEC 60076-1:2011"\n')],
        [
            'unit.toml: [line 2] standard: must be "IEC 60076-5" or "IEEE C57.12.00", an edition may follow (":2006", "-2015"), got \'IEC 60076-1:2011\'.'
        ],
    ),
    "path in the tag": (
        [('tag = "BV-T1"', 'tag = "../BV-T1"')],
        [
            'unit.toml: [line 5] identity.tag: must be a tag such as "BV-T1": at most 64 letters, digits and ". _ -", first a letter or digit, got \'../BV-T1\'; source: order specification.'
        ],
    ),
    "hyphen in the revision": (
        [('revision = "A"', 'revision = "A-1"')],
        [
            'unit.toml: [line 10] identity.revision: must be a revision such as "A": letters, digits and ". _", got \'A-1\'.'
        ],
    ),
    "control character": (
        [('order = "BVN-1"', 'order = "BVN\\u001b[31m"')],
        [
            "unit.toml: [line 9] identity.order: must be text without control characters, got U+001B in 'BVN\\x1b[31m'; source: order specification."
        ],
    ),
    "direction override": (
        [('order = "BVN-1"', 'order = "BVN\\u202e1"')],
        [
            "unit.toml: [line 9] identity.order: must be text without control characters, got U+202E in 'BVN\\u202e1'; source: order specification."
        ],
    ),
    "blank text": (
        [('order = "BVN-1"', 'order = "  "')],
        [
            "unit.toml: [line 9] identity.order: must be text of at most 500 characters, not blank, got '  '; source: order specification."
        ],
    ),
    "long text": (
        [
            (
                'order = "BVN-1"',
                'order = "xxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxx"',
            )
        ],
        [
            "unit.toml: [line 9] identity.order: must be text of at most 500 characters, not blank, got 'xxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxx... (503 characters); source: order specification."
        ],
    ),
    "winding with a bad name": (
        [("[windings.LV]", '[windings."L/V"]')],
        [
            "unit.toml: [line 36] windings.\"L/V\": its name must be at most 16 letters, digits and underscores, first a letter, got 'L/V'."
        ],
    ),
    "winding with a reserved name": (
        [("[windings.LV]", "[windings.neutral]")],
        [
            "unit.toml: [line 36] windings.neutral: its name must be another name: 'neutral' is reserved for result ids and keys."
        ],
    ),
    "one winding": (
        [("[windings.LV]", "[windings.HV.LV]")],
        [
            "unit.toml: [line 36] windings.HV.LV: is not a known key; known here: rated_power, rated_voltage, highest_voltage, conductor_material, conductor_section, stabilising, eddy_share, insulation_section, tappings, thermal_class, start_temperature, fault_duration."
        ],
    ),
    "winding that is no table": (
        [("[windings.HV]", "[windings]\nTV = 5\n[windings.HV]")],
        ["unit.toml: [line 26] windings.TV: must be a table, got 5."],
    ),
    "rows that are a table": (
        [
            (
                '[[impedances]]\nbetween = ["HV", "LV"]\ntapping = "principal"',
                '[impedances]\nbetween = ["HV", "LV"]\ntapping = "principal"',
            ),
            ("[[impedances]]", "[a]"),
            ("[[impedances]]", "[b]"),
        ],
        [
            "unit.toml: [line 49] impedances: must be an array of tables [[impedances]], got a table.",
            "unit.toml: [line 60] a: is not a known key; known here: format, standard, identity, rating, windings, impedances, system, earthing, zero_sequence, tap_changer, bushings, neutral, design, limits, declared.",
            "unit.toml: [line 70] b: is not a known key; known here: format, standard, identity, rating, windings, impedances, system, earthing, zero_sequence, tap_changer, bushings, neutral, design, limits, declared.",
        ],
    ),
    "no rows": (
        [
            ("[identity]", "impedances = []\n[identity]"),
            ("[[impedances]]", "[a]"),
            ("[[impedances]]", "[b]"),
            ("[[impedances]]", "[c]"),
        ],
        [
            "unit.toml: [line 4] impedances: must not be empty.",
            "unit.toml: [line 50] a: is not a known key; known here: format, standard, identity, rating, windings, impedances, system, earthing, zero_sequence, tap_changer, bushings, neutral, design, limits, declared.",
            "unit.toml: [line 61] b: is not a known key; known here: format, standard, identity, rating, windings, impedances, system, earthing, zero_sequence, tap_changer, bushings, neutral, design, limits, declared.",
            "unit.toml: [line 71] c: is not a known key; known here: format, standard, identity, rating, windings, impedances, system, earthing, zero_sequence, tap_changer, bushings, neutral, design, limits, declared.",
        ],
    ),
    "row that is no table": (
        [
            ("[identity]", "impedances = [1]\n[identity]"),
            ("[[impedances]]", "[a]"),
            ("[[impedances]]", "[b]"),
            ("[[impedances]]", "[c]"),
        ],
        [
            "unit.toml: [line 4] impedances[1]: must be a table, got 1.",
            "unit.toml: [line 50] a: is not a known key; known here: format, standard, identity, rating, windings, impedances, system, earthing, zero_sequence, tap_changer, bushings, neutral, design, limits, declared.",
            "unit.toml: [line 61] b: is not a known key; known here: format, standard, identity, rating, windings, impedances, system, earthing, zero_sequence, tap_changer, bushings, neutral, design, limits, declared.",
            "unit.toml: [line 71] c: is not a known key; known here: format, standard, identity, rating, windings, impedances, system, earthing, zero_sequence, tap_changer, bushings, neutral, design, limits, declared.",
        ],
    ),
    "one winding in a row": (
        [('between = ["HV", "LV"]', 'between = ["HV"]')],
        [
            'unit.toml: [line 50] impedances[1].between: must be the names of two windings such as ["HV", "LV"], got an array; source: routine test report or rating plate.'
        ],
    ),
    "a name in a row that is none": (
        [('between = ["HV", "LV"]', 'between = ["HV", "L\\u0080V"]')],
        [
            'unit.toml: [line 50] impedances[1].between: must be the names of two windings such as ["HV", "LV"], got \'L\\x80V\'; source: routine test report or rating plate.'
        ],
    ),
    "the same winding twice in a row": (
        [('between = ["HV", "LV"]', 'between = ["HV", "HV"]')],
        [
            'unit.toml: [line 50] impedances[1].between: must be the names of two windings such as ["HV", "LV"], got \'HV, HV\'; source: routine test report or rating plate.'
        ],
    ),
    "prefault voltage in per cent": (
        [("prefault_voltage = { minus = 1.1 }", "prefault_voltage = 100")],
        [
            "unit.toml: [line 82] system.prefault_voltage: must be a number from 0.5 to 1.5, without a unit, got 100; source: network operator."
        ],
    ),
    "prefault voltage of a tapping": (
        [("prefault_voltage = { minus = 1.1 }", 'prefault_voltage = { minus = "1.1" }')],
        [
            "unit.toml: [line 82] system.prefault_voltage: of tapping 'minus' must be a number from 0.5 to 1.5, without a unit, got '1.1'; source: network operator."
        ],
    ),
    "prefault voltage of no tapping": (
        [("prefault_voltage = { minus = 1.1 }", "prefault_voltage = {}")],
        [
            "unit.toml: [line 82] system.prefault_voltage: must name at least one tapping, got an empty table; source: network operator."
        ],
    ),
    "prefault voltage of a bad name": (
        [("prefault_voltage = { minus = 1.1 }", 'prefault_voltage = { "a b" = 1.1 }')],
        [
            "unit.toml: [line 82] system.prefault_voltage: must be keyed by names of tappings, got 'a b'; source: network operator."
        ],
    ),
    "misspelt prefault voltage": (
        [("prefault_voltage = { minus = 1.1 }", "prefalt_voltage = 1.1")],
        ["unit.toml: [line 82] system.prefalt_voltage: is not a known key (did you mean 'prefault_voltage'?)."],
    ),
    "misspelt table of prefault voltages": (
        [("prefault_voltage = { minus = 1.1 }", "prefalt_voltage = { minus = 1.1 }")],
        [
            "unit.toml: [line 82] system.prefalt_voltage.minus: is not a known key; known here: voltage, short_circuit_power, column, short_circuit_power_minimum, x_over_r, x0_over_x1, peak_factor, out_of_phase, series_reactance, terminal_fault_excluded.",
            "unit.toml: [line 82] system.prefalt_voltage: is not a winding (did you mean 'prefault_voltage'?); known: HV, LV, prefault_voltage.",
        ],
    ),
    "misspelt table word": (
        [('short_circuit_power = "10000 MVA"', 'short_circuit_power = "tabel"')],
        [
            "unit.toml: [line 86] system.HV.short_circuit_power: must be \"table\" or an apparent power such as \"1 MVA\" (unit one of VA, kVA, MVA, GVA), got 'tabel' (did you mean 'table'?); source: network operator."
        ],
    ),
    "system that is no table": (
        [
            ("[system]\nprefault_voltage = { minus = 1.1 }\n", ""),
            ("[system.HV]", "[a]"),
            ("[identity]", "system = 5\n[identity]"),
        ],
        [
            "unit.toml: [line 4] system: must be a table, got 5.",
            "unit.toml: [line 83] a: is not a known key; known here: format, standard, identity, rating, windings, impedances, system, earthing, zero_sequence, tap_changer, bushings, neutral, design, limits, declared.",
        ],
    ),
    "earthing by a word": (
        [('HV = "5 ohm + 12j ohm"', 'HV = "soild"')],
        [
            'unit.toml: [line 95] earthing.HV: must be "solid", "isolated" or an impedance such as "20 ohm" or "5 ohm + 12j ohm" (unit one of mohm, ohm, kohm), got \'soild\' (did you mean \'solid\'?); source: network operator.'
        ],
    ),
    "earthing without a unit": (
        [('HV = "5 ohm + 12j ohm"', 'HV = "5"')],
        [
            'unit.toml: [line 95] earthing.HV: must be "solid", "isolated" or an impedance such as "20 ohm" or "5 ohm + 12j ohm" (unit one of mohm, ohm, kohm), got \'5\'; source: network operator.'
        ],
    ),
    "earthing of negative resistance": (
        [('HV = "5 ohm + 12j ohm"', 'HV = "-5 ohm"')],
        [
            'unit.toml: [line 95] earthing.HV: must be "solid", "isolated" or an impedance such as "20 ohm" or "5 ohm + 12j ohm" (unit one of mohm, ohm, kohm), got \'-5 ohm\'; source: network operator.'
        ],
    ),
    "turns by a word": (
        [("turns = 402", 'turns = "402"')],
        [
            "unit.toml: [line 130] design.coils[1].blocks[1].turns: must be a number of turns (negative against the main coil), got '402'; source: maker's design sheet."
        ],
    ),
    "coil without blocks": (
        [('blocks = [ { bottom = "90 mm", top = "1610 mm", turns = 402, discs = 80 } ]', "blocks = []")],
        ["unit.toml: [line 130] design.coils[1].blocks: must not be empty."],
    ),
    "limit without its source": (
        [(', source = "the maker\'s proven rule 12"', "")],
        [
            'unit.toml: [line 197] limits."strength.LV.buckling".source: is missing; it must be text of at most 500 characters, not blank.'
        ],
    ),
    "limit that is a plain number": (
        [
            (
                '"strength.LV.buckling" = { value = 1.8, source = "the maker\'s proven rule 12" }',
                '"strength.LV.buckling" = 1.8',
            )
        ],
        ['unit.toml: [line 197] limits."strength.LV.buckling": must be a table, got 1.8.'],
    ),
    "limit in an unknown unit": (
        [("value = 1.8", 'value = "1.8 MPaa"')],
        [
            'unit.toml: [line 197] limits."strength.LV.buckling".value: must be a quantity such as "8 kA", a share such as "0.35 Rp0.2" or a bare number for a ratio, got \'1.8 MPaa\' (did you mean \'MPa\'?).'
        ],
    ),
    "limit below zero": (
        [('"strength.LV.buckling" = { value = 1.8', '"thermal.LV.temperature" = { value = "-5 degC"')],
        [
            "unit.toml: [line 197] limits.\"thermal.LV.temperature\".value: must be above zero, as a limit is, got '-5 degC'."
        ],
    ),
    "limit of zero": (
        [('"strength.LV.buckling" = { value = 1.8', '"strength.LV.tilting" = { value = "0 kN"')],
        ["unit.toml: [line 197] limits.\"strength.LV.tilting\".value: must be above zero, as a limit is, got '0 kN'."],
    ),
    "limit that is a number below zero": (
        [("value = 1.8", "value = -1.8")],
        ['unit.toml: [line 197] limits."strength.LV.buckling".value: must be above zero, as a limit is, got -1.8.'],
    ),
    "limit that would overflow in another unit": (
        [('"strength.LV.buckling" = { value = 1.8', '"strength.LV.hoop_mean" = { value = "1e307 GPa"')],
        [
            "unit.toml: [line 197] limits.\"strength.LV.hoop_mean\".value: must be zero or of a size from 1e-12 to 1e+12, got '1e307 GPa'."
        ],
    ),
    "limit that is a table": (
        [("value = 1.8", "value = true")],
        [
            'unit.toml: [line 197] limits."strength.LV.buckling".value: must be a quantity such as "8 kA", a share such as "0.35 Rp0.2" or a bare number for a ratio, got true.'
        ],
    ),
    "limit that is not finite": (
        [("value = 1.8", "value = inf")],
        [
            'unit.toml: [line 197] limits."strength.LV.buckling".value: must be a number from -1e+09 to 1e+09, without a unit, got inf.'
        ],
    ),
    "limit that overflows": (
        [("value = 1.8", 'value = "1e999 MPa"')],
        [
            'unit.toml: [line 197] limits."strength.LV.buckling".value: must be a stress such as "1 MPa" (unit one of Pa, kPa, MPa, GPa, N/mm^2), finite, got \'1e999 MPa\'.'
        ],
    ),
    "share for a declared value": (
        [('"duty.LV.peak" = "8.0 kA"', '"duty.LV.peak" = "0.35 Rp0.2"')],
        [
            'unit.toml: [line 200] declared."duty.LV.peak": must be a quantity such as "8 kA" or a bare number for a ratio, got \'0.35 Rp0.2\'.'
        ],
    ),
    "result id that is none": (
        [('"duty.LV.peak" = "8.0 kA"', 'peak = "8.0 kA"')],
        ["unit.toml: [line 200] declared.peak: its name must be a result id such as \"duty.LV.peak\", got 'peak'."],
    ),
    "vector group that is none": (
        [('"YNd11"', '"YNx11"')],
        [
            "unit.toml: [line 15] rating.vector_group: must be a vector group such as \"YNd11\" (IEC 60076-1, clause on connection symbols), got 'YNx11', which cannot be read from 'x11' on; source: rating plate."
        ],
    ),
    "vector group that is a number": (
        [('"YNd11"', "11")],
        [
            'unit.toml: [line 15] rating.vector_group: must be a vector group such as "YNd11" (IEC 60076-1), the high-voltage winding first, got 11; source: rating plate.'
        ],
    ),
    "missing tables": (
        [("[rating]", "[x]")],
        [
            "unit.toml: rating: is missing; it must be a table.",
            "unit.toml: [line 12] x: is not a known key; known here: format, standard, identity, rating, windings, impedances, system, earthing, zero_sequence, tap_changer, bushings, neutral, design, limits, declared.",
        ],
    ),
}


@pytest.mark.parametrize("name", CASES)
def test_the_whole_message(name, refused):
    """A fault names file, line, key, what is wanted and what was got."""
    edits, faults = CASES[name]
    assert refused(*edits) == faults
