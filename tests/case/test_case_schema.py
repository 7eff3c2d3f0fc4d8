"""Rules of the case file: what is right is read, what is wrong is named with line, key and what would be right."""

import pytest
from pydantic import ValidationError

from gibbsmin.case.axes import axis_values
from gibbsmin.case.complaints import complaint
from gibbsmin.case.schema import Case
from gibbsmin.case.source import open_source
from gibbsmin.errors import CaseError


def read(path):
    source = open_source(path)
    try:
        return Case.model_validate(source.data)
    except ValidationError as error:
        raise complaint(error, source, Case) from None


def test_the_good_case_and_its_defaults(write):
    case = read(write())
    assert case.species.condensed
    assert not case.species.ions
    assert case.show.threshold == pytest.approx(1e-6)
    assert case.show.sort == "amount"
    assert case.feeds["steam"].steam_to_carbon == 3.0


def test_a_case_survives_being_written_with_its_defaults(write):
    case = read(write(('from = "800 degC"\nto = "900 degC"\npoints = 3', 'values = ["800 degC", "900 degC"]')))
    assert Case.model_validate(case.model_dump(by_alias=True, exclude_none=True)) == case


HELD_T, HELD_P, FLOW = 'temperature = "870 degC"', 'pressure = "24 bar"', 'flow = "100 kmol/h"'
PERCENT = "N2 = 2.0, CO2 = 1.0 }"
BAD = [
    # held
    (HELD_T, 'temperature = "870"', 17, "held.temperature", "has no unit"),
    (HELD_T, "temperature = true", 17, "held.temperature", "got bool True"),
    (HELD_T, 'temperature = "870 bar"', 17, "held.temperature", "is a pressure, expected a temperature"),
    (HELD_T, 'temperature = "870 C"', 17, "held.temperature", "degC"),
    (HELD_T, "temperature = [1]", 17, "held.temperature", "got list"),
    (HELD_T, "temperature = 1979-05-27", 17, "held.temperature", "expected a number in K"),
    (HELD_T, "temperature = -3", 17, "held.temperature", "too low"),
    (HELD_T, "temperature = nan", 17, "held.temperature", "finite"),
    (HELD_T, 'temperature = "-300 degC"', 17, "held.temperature", "too low"),
    (HELD_P, 'pressure = "24 barg"', 18, "held.pressure", "gauge"),
    (HELD_P, "pressure = 0", 18, "held.pressure", "more than 0 Pa"),
    (HELD_P, HELD_P + "\nvolum = 3", 19, "held.volum", "'volume'"),
    (HELD_P, HELD_P + "\nenthalpy = 3", 19, "held.enthalpy", "its place is taken by heat, counted from the feeds"),
    ("[held]", "[hold]", 16, "hold", "did you mean 'held'"),
    # feeds: composition
    (PERCENT, "N2 = 2.0, CO2 = 1.6 }", 7, "feeds.gas.mole_percent", "sums to 100.6; expected 100 within 0.5"),
    (PERCENT, "N2 = -2.0, CO2 = 5.0 }", 7, "feeds.gas.mole_percent.N2", "at least 0"),
    (PERCENT, 'N2 = "2", CO2 = 1.0 }', 7, "feeds.gas.mole_percent.N2", "expected a number, got '2'"),
    (PERCENT, "N2 = inf, CO2 = 1.0 }", 7, "feeds.gas.mole_percent.N2", "finite"),
    (PERCENT, "N2 = true, CO2 = 1.0 }", 7, "feeds.gas.mole_percent.N2", "got true"),
    ("mole_percent = { CH4 = 93.0", "mole_fraction = { CH4 = 93.0", 7, "feeds.gas.mole_fraction", "expected 1 within"),
    ("mole_percent = { CH4 = 93.0", "mol_percent = { CH4 = 93.0", 7, "feeds.gas.mol_percent", "'mole_percent'"),
    ('species = "H2O"', 'species = "H2O"\ncomposition = "air"', 13, "feeds.steam.composition", "exactly one of"),
    ('species = "H2O"', 'composition = "wet air"', 12, "feeds.steam.composition", "expected 'air'"),
    ('species = "H2O"\n', "", 11, "feeds.steam", "does not say what it is made of"),
    ('species = "H2O"\nsteam_to_carbon = 3.0', "amounts = {}", 12, "feeds.steam.amounts", "holds no species"),
    ('species = "H2O"', "amounts = { H2O = 1.0 }", 13, "feeds.steam.steam_to_carbon", "already says how much"),
    ("[feeds.steam]", '[feeds."wet steam"]', 11, "feeds.wet steam", "letters, digits"),
    ("[feeds.steam]", "[feed.steam]", 11, "feed", "did you mean 'feeds'"),
    # feeds: size
    (FLOW, 'flow = "100 kmol"', 8, "feeds.gas.flow", "is an amount of substance, expected a flow"),
    (FLOW, 'flow = "1e300 t/h"', 8, "feeds.gas.flow", "too high"),
    ("steam_to_carbon = 3.0", "steam_to_carbon = 1e9", 13, "feeds.steam.steam_to_carbon", "at most 1000000"),
    ('from = "800 degC"', "from = 1e30", 22, "sweep[1].from", "too high"),
    (FLOW, 'flow = "100 scfm"', 8, "feeds.gas.flow", "Nm3"),
    (FLOW, "flow = -1.0", 8, "feeds.gas.flow", "too low"),
    (FLOW, 'amount = "3 kmol/h"', 8, "feeds.gas.amount", "expected an amount of substance (mol) or a mass (kg)"),
    (FLOW, FLOW + "\namount = 2.0", 9, "feeds.gas.amount", "exactly one of"),
    (FLOW, "", 6, "feeds.gas", "does not say how much"),
    (FLOW, 'folw = "100 kmol/h"', 8, "feeds.gas.folw", "did you mean 'flow'"),
    ("steam_to_carbon = 3.0", "steam_to_carbon = -1", 13, "feeds.steam.steam_to_carbon", "at least 0"),
    ("steam_to_carbon = 3.0", 'steam_to_carbon = "3"', 13, "feeds.steam.steam_to_carbon", "expected a number"),
    ("steam_to_carbon = 3.0", "excess_air = -101", 13, "feeds.steam.excess_air", "at least -100"),
    # sweep
    ('"held.temperature"', '"held.temprature"', 21, "sweep[1].vary", "'held.temperature'"),
    ('"held.temperature"', '"feeds.gas.amount"', 21, "sweep[1].vary", "feeds.gas.flow"),
    ('"held.temperature"', '"feeds.steam.flow"', 21, "sweep[1].vary", "feeds.steam.steam_to_carbon"),
    ('"held.temperature"', '"gas"', 21, "sweep[1].vary", "cannot be varied"),
    ('"held.temperature"', '"feeds.steam.steam_to_carbon"', 22, "sweep[1].from", "expected a plain number"),
    ('from = "800 degC"', 'from = "800 bar"', 22, "sweep[1].from", "is a pressure"),
    ('from = "800 degC"', "from = true", 22, "sweep[1].from", "true or false"),
    ('from = "800 degC"', 'from = "-800 degC"', 22, "sweep[1].from", "more than 0 K"),
    ('from = "800 degC"', 'from = "900 degC"', 23, "sweep[1].to", "the same"),
    ("points = 3", "points = 3.0", 24, "sweep[1].points", "whole number"),
    ("points = 3", "points = 1", 24, "sweep[1].points", "at least 2"),
    ("points = 3", "points = 10000001", 24, "sweep[1].points", "at most 10000000"),
    ("points = 3", 'spacing = "log"', 24, "sweep[1].spacing", "'linear' or 'logarithmic'"),
    ("points = 3", "values = [900.0]", 22, "sweep[1].from", "leave out from, to"),
    ("points = 3", "", 20, "sweep[1]", "give from, to and points"),
    ("[[sweep]]", "[sweep]", 20, "sweep", "[[sweep]]"),
    # species, show, top
    ('elements = "from feeds"', 'elements = ["C"]', 4, "species.elements", "a text in quotes, got a list"),
    ('elements = "from feeds"', "condensed = 1", 4, "species.condensed", "true or false"),
    ('elements = "from feeds"', "condensd = true", 4, "species.condensd", "'condensed'"),
    ('elements = "from feeds"', 'allow = "CH4"', 4, "species.allow", "a list in [ ]"),
    ('elements = "from feeds"', 'allow = ["CH4", ""]', 4, "species.allow[2]", "not empty"),
    ('elements = "from feeds"', "allow = []", 4, "species.allow", "at least one"),
    ('elements = "from feeds"', 'allow = ["CH4"]\nexclude = ["H2"]', 5, "species.exclude", "leave out exclude"),
    ('threshold = "1 ppm"', 'threshold = "1 bar"', 27, "show.threshold", "expected a plain number"),
    ('threshold = "1 ppm"', "threshold = 1", 27, "show.threshold", "less than 1"),
    ('threshold = "1 ppm"', 'sort = "mass"', 27, "show.sort", "'amount' or 'name'"),
    ("[show]", "[target]", 26, "target", "known here are title, species, feeds, surroundings"),
    ("[show]", "[[stage]]", 26, "stage", "no such table or key in this version"),
    ('title = "Tube outlet of an invented reformer"', "", None, "title", "is missing"),
    ('title = "Tube outlet of an invented reformer"', 'title = " "', 1, "title", "not empty"),
    ("[species]\nelements", "species", 3, "species", "expected a table"),
]


@pytest.mark.parametrize(("old", "new", "line", "key", "words"), BAD)
def test_what_is_wrong_is_named(write, old, new, line, key, words):
    path = write((old, new))
    with pytest.raises(CaseError) as caught:
        read(path)
    problems = [(caught.value.line, caught.value.key, caught.value.message)]
    assert problems[0][:2] == (line, key)
    assert words in problems[0][2]


def test_several_problems_come_at_once_in_the_order_of_the_file(write):
    path = write(("points = 3", "points = 1"), (FLOW, "flow = -1"), (HELD_P, 'pressure = "24 barg"'))
    with pytest.raises(CaseError) as caught:
        read(path)
    assert caught.value.line == 8
    assert "also line 18: held.pressure" in str(caught.value)
    assert "also line 24: sweep[1].points" in str(caught.value)


def test_no_more_problems_than_a_screen_holds(write):
    path = write(("[show]\n", "[show]\n" + "".join(f"x{k} = 1\n" for k in range(50))))
    with pytest.raises(CaseError) as caught:
        read(path)
    assert len(str(caught.value).splitlines()) == 6
    assert "and 45 more" in str(caught.value)


def sweep_of(write, text):
    case = read(write(('vary = "held.temperature"\nfrom = "800 degC"\nto = "900 degC"\npoints = 3', text)))
    return axis_values(case.sweep[0], case.inputs(), case.feeds)


def test_linear_values_in_si_and_as_typed(write):
    axis = sweep_of(write, 'vary = "held.temperature"\nfrom = "800 degC"\nto = "1173.15 K"\npoints = 5')
    assert axis.values == pytest.approx([1073.15, 1098.15, 1123.15, 1148.15, 1173.15])
    assert (axis.unit, axis.typed_unit) == ("K", "degC")
    assert axis.typed_values.tolist() == [800.0, 825.0, 850.0, 875.0, 900.0]


def test_logarithmic_values(write):
    axis = sweep_of(
        write, 'vary = "held.pressure"\nfrom = "1 bar"\nto = "100 bar"\npoints = 3\nspacing = "logarithmic"'
    )
    assert axis.values == pytest.approx([1e5, 1e6, 1e7])
    assert axis.typed_values.tolist() == [1.0, 10.0, 100.0]


def test_values_may_fall_and_bare_numbers_are_si(write):
    axis = sweep_of(write, 'vary = "held.temperature"\nvalues = [1200, 1100.5]')
    assert (axis.values.tolist(), axis.typed_unit) == ([1200.0, 1100.5], "K")


def test_mass_flows_may_be_varied_where_the_feed_is_molar(write):
    axis = sweep_of(write, 'vary = "feeds.gas.flow"\nvalues = ["1.8 t/h", "3.6 t/h"]')
    assert axis.values == pytest.approx([0.5, 1.0])
    assert (axis.unit, axis.typed_unit) == ("kg/s", "t/h")


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ('vary = "feeds.gas.flow"\nvalues = ["1 t/h", "1 kmol/h"]', "use one kind"),
        ('vary = "held.pressure"\nfrom = "1 bar"\nto = "0 bar"\npoints = 3', "more than 0 Pa"),
        ('vary = "feeds.steam.steam_to_carbon"\nfrom = 0\nto = 1\npoints = 3\nspacing = "logarithmic"', "above zero"),
        ('vary = "held.temperature"\nvalues = []', "lists no values"),
        ('vary = "held.temperature"\nvalues = ["800 degC", "1073.15 K"]', "the same"),
    ],
)
def test_values_that_do_not_suit(write, text, words):
    with pytest.raises(CaseError, match=words):
        sweep_of(write, text)


PRESSURES = '\n[[sweep]]\nvary = "held.pressure"\nfrom = 1e5\nto = 2e5\npoints = {}\n\n[show]'


def test_size_and_number_of_sweeps(write):
    assert len(read(write(("[show]", PRESSURES.format(3_333_333)))).sweep) == 2
    with pytest.raises(CaseError, match="10,000,002 states; at most 10,000,000"):
        read(write(("[show]", PRESSURES.format(3_333_334))))
    with pytest.raises(CaseError, match="varied twice"):
        read(write(("[show]", PRESSURES.replace("pressure", "temperature").format(3))))
    more = "".join(f'[[sweep]]\nvary = "{name}"\nvalues = [1.0]\n\n' for name in "abcdef")
    with pytest.raises(CaseError, match="7 inputs are varied; at most 6"):
        read(write(("[show]", f"{more}[show]")))


@pytest.mark.parametrize(
    ("changes", "line", "key", "words"),
    [
        ([("[show]", '[design]\nkind = "random"\n[show]')], 27, "design.kind", "'sobol'"),
        ([("[show]", '[design]\nkind = "sobol"\n[show]')], 26, "design", "sobol needs points and seed"),
        ([("[show]", '[design]\nkind = "sobol"\npoints = 8\n[show]')], 26, "design", "sobol needs seed"),
        ([("[show]", '[design]\nkind = "sobol"\npoints = 1\nseed = 1\n[show]')], 28, "design.points", "at least 2"),
        ([("[show]", "[design]\nseed = -1\n[show]")], 27, "design.seed", "at least 0"),
        ([("[show]", "[design]\nseed = 1\n[show]")], 27, "design.seed", "a random design only"),
        ([("[show]", '[design]\nkind = "in step"\npoints = 4\n[show]')], 28, "design.points", "a random design only"),
        ([("[show]", '[design]\nkind = "sobol"\npoints = 8\nseed = 1\n[show]')], 24, "sweep[1].points", "in [design]"),
        (
            [("[show]", '[design]\nkind = "in step"\n' + PRESSURES.format(4))],
            *(29, "sweep[2]", "held.temperature has 3, held.pressure has 4"),
        ),
        (
            [
                ("points = 3", ""),
                ('from = "800 degC"\nto = "900 degC"', 'values = ["800 degC"]'),
                ("[show]", '[design]\nkind = "sobol"\npoints = 8\nseed = 1\n[show]'),
            ],
            *(22, "sweep[1].values", "from and to in place of values"),
        ),
        (
            [
                ('[[sweep]]\nvary = "held.temperature"\nfrom = "800 degC"\nto = "900 degC"\npoints = 3\n', ""),
                ("[show]", '[design]\nkind = "in step"\n[show]'),
            ],
            *(21, "design", "nothing is varied in step"),
        ),
    ],
)
def test_designs_that_cannot_be(write, changes, line, key, words):
    with pytest.raises(CaseError) as caught:
        read(write(*changes))
    assert (caught.value.line, caught.value.key) == (line, key)
    assert words in caught.value.message
