"""Small invented trains, as texts of case files; all of few species, so that they take no time."""

from __future__ import annotations

SHIFT = """
title = "Shift with a cooler and a knock-out (invented)"
[species]
settling = ["CO", "CO2", "H2", "H2O"]
[feeds.gas]
mole_percent = { CO = 20.0, H2 = 75.0, CH4 = 4.9995, Ar = 0.0005 }
flow = "100 kmol/h"
temperature = "350 degC"
pressure = "25 bar"
[feeds.steam]
species = "H2O"
flow = "60 kmol/h"
temperature = "350 degC"
pressure = "25 bar"
[[stage]]
name = "hot_bed"
inlets = ["gas", "steam"]
held = { adiabatic = true, pressure_drop = "1 bar" }
key_figures = ["shift"]
[[stage]]
name = "waste_heat_boiler_with_a_long_name"
inlets = ["hot_bed"]
frozen = true
held = { temperature = "200 degC" }
[[stage]]
name = "cold_bed"
inlets = ["waste_heat_boiler_with_a_long_name"]
held = { adiabatic = true }
[[stage]]
name = "knock_out"
inlets = ["cold_bed"]
held = { temperature = "40 degC", pressure = "23 bar" }
species = { settling = ["H2O", "H2O(l)"] }
take = { water = { of = ["H2O(l)"], percent = 100.0 } }
"""

LOOP = """
title = "Ammonia loop (invented)"
[species]
settling = ["N2", "H2", "NH3"]
[feeds.make_up]
mole_percent = { N2 = 24.5, H2 = 73.5, Ar = 2.0 }
flow = "1000 kmol/h"
temperature = "40 degC"
pressure = "30 bar"
[[stage]]
name = "compressor"
inlets = ["make_up"]
frozen = true
held = { entropy = "from inlets", isentropic_efficiency = 0.8, pressure = "150 bar" }
[[stage]]
name = "heater"
inlets = ["compressor"]
recycled = ["condenser"]
frozen = true
held = { temperature = "380 degC" }
[[stage]]
name = "converter"
inlets = ["heater"]
held = { adiabatic = true }
key_figures = ["ammonia"]
[[stage]]
name = "condenser"
inlets = ["converter"]
frozen = true
held = { temperature = "-10 degC" }
take = { ammonia = { of = ["NH3"], percent = 90.0 }, purge = { percent = 3.0 } }
"""

PURGES = """
[[sweep]]
vary = "stages.condenser.take.purge.percent"
values = [0.0, 1.0, 3.0, 10.0]
"""
"""Along the loop; without a purge the argon has nowhere to go."""

TOO_COLD = """
title = "A cooler that takes too much (invented)"
[species]
settling = ["CO", "CO2", "H2", "H2O"]
[feeds.gas]
mole_percent = { CO = 20.0, H2O = 40.0, H2 = 40.0 }
flow = "100 kmol/h"
temperature = "300 degC"
pressure = "20 bar"
[[stage]]
name = "bed"
inlets = ["gas"]
held = { adiabatic = true }
[[stage]]
name = "freezer"
inlets = ["bed"]
held = { heat = "-50 MW" }
[[stage]]
name = "heater"
inlets = ["freezer"]
frozen = true
held = { temperature = "40 degC" }
[[stage]]
name = "last"
inlets = ["heater"]
held = { adiabatic = true }
"""

COOLING = """
[[sweep]]
vary = "stages.freezer.held.heat"
values = ["-0.1 MW", "-50 MW", "-0.2 MW"]
"""

BURNER = """
title = "Char burnt in a crucible, its gas cooled (invented)"
[feeds.char]
amount = "1 kg"
temperature = "25 degC"
pressure = "1 bar"
[feeds.char.analysis]
basis = "dry"
ultimate_percent = { C = 80.0, H = 2.0, O = 8.0, ash = 10.0 }
moisture_percent_dry = 5.0
[feeds.oxygen]
mole_percent = { O2 = 99.0, Ar = 1.0 }
mass_ratio = 2.5
to = "char"
temperature = "25 degC"
pressure = "1 bar"
[[stage]]
name = "crucible"
inlets = ["char", "oxygen"]
held = { adiabatic = true }
species = { allow = ["CO", "CO2", "O2", "O", "H2", "H2O", "OH", "H"] }
[[stage]]
name = "cooler"
inlets = ["crucible"]
frozen = true
held = { temperature = "200 degC" }
"""
"""A fuel by analysis, and amounts that are no flows."""
