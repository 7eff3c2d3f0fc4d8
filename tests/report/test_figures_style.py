"""Colours stay apart to all eyes and in grey, words can be read, formulas and units are written as people do."""

from __future__ import annotations

from itertools import combinations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from matplotlib import rcParams
from matplotlib.colors import to_rgb

from gibbsmin.report.figures.labels import spread
from gibbsmin.report.figures.names import held_title, input_unit, input_words, typed_units
from gibbsmin.report.figures.style import (
    INK,
    PALETTE,
    SCALE,
    contrast,
    formula,
    in_formulas,
    readable,
    shades,
    styled,
    unit_word,
)

# Machado, Oliveira & Fernandes, IEEE Trans. Vis. Comput. Graphics 15 (2009) 1291: severity 1, on linear RGB.
BLIND = {
    "usual": np.eye(3),
    "protan": [[0.152286, 1.052583, -0.204868], [0.114503, 0.786281, 0.099216], [-0.003882, -0.048116, 1.051998]],
    "deutan": [[0.367322, 0.860646, -0.227968], [0.280085, 0.672501, 0.047413], [-0.011820, 0.042940, 0.968881]],
    "tritan": [[1.255528, -0.076749, -0.178779], [-0.078411, 0.930809, 0.147602], [0.004733, 0.691367, 0.303900]],
}
# IEC 61966-2-1: linear sRGB to CIE XYZ at D65.
TO_XYZ = np.array(
    [[0.4124564, 0.3575761, 0.1804375], [0.2126729, 0.7151522, 0.0721750], [0.0193339, 0.1191920, 0.9503041]]
)


def lab(colour: str, eyes: str = "usual") -> np.ndarray:
    """CIELAB of a colour as some eyes see it."""
    rgb = np.array(to_rgb(colour))
    linear = np.where(rgb <= 0.04045, rgb / 12.92, ((rgb + 0.055) / 1.055) ** 2.4)
    seen = np.clip(np.array(BLIND[eyes]) @ linear, 0.0, 1.0)
    t = TO_XYZ @ seen / TO_XYZ.sum(axis=1)
    f = np.where(t > (6 / 29) ** 3, np.cbrt(t), t / (3 * (6 / 29) ** 2) + 4 / 29)
    return np.array([116 * f[1] - 16, 500 * (f[0] - f[1]), 200 * (f[1] - f[2])])


@pytest.mark.parametrize("eyes", BLIND)
def test_line_colours_differ_to_all_eyes(eyes: str) -> None:
    assert len(PALETTE) == 7
    for one, two in combinations(PALETTE, 2):
        assert np.linalg.norm(lab(one, eyes) - lab(two, eyes)) > 24.0


def test_line_colours_differ_in_grey_and_stand_out_from_paper() -> None:
    lightness = sorted(lab(colour)[0] for colour in PALETTE)
    assert min(np.diff(lightness)) > 7.0
    assert min(contrast(colour) for colour in PALETTE) > 3.0
    assert lab(INK)[0] < 10.0


def test_contrast_is_that_of_the_standard() -> None:
    # WCAG 2.2: black on white is 21; #767676 is known as the lightest grey that passes 4.5.
    assert contrast("#000000") == pytest.approx(21.0)
    assert contrast("#767676") == pytest.approx(4.54, abs=0.01)
    assert contrast("#777777") < 4.5


@given(st.from_regex(r"#[0-9a-f]{6}", fullmatch=True))
def test_words_can_be_read_in_any_colour(colour: str) -> None:
    assert contrast(readable(colour)) >= 4.5


@pytest.mark.parametrize("count", [1, 2, 5])
def test_ordered_values_darken(count: int) -> None:
    lightness = [lab(colour)[0] for colour in shades(count)]
    assert lightness == sorted(lightness, reverse=True)
    assert min(contrast(colour) for colour in shades(count)) > 3.0
    assert count == 1 or min(-np.diff(lightness)) > 8.0


def test_maps_darken_evenly_and_ink_can_be_read_on_them() -> None:
    lightness = np.array(
        [lab("#{:02x}{:02x}{:02x}".format(*(int(255 * c) for c in SCALE(x)[:3])))[0] for x in np.linspace(0, 1, 21)]
    )
    steps = -np.diff(lightness)
    assert steps.min() > 0.0
    assert steps.max() < 1.5 * steps.mean()
    darkest = "#{:02x}{:02x}{:02x}".format(*(int(255 * c) for c in SCALE(1.0)[:3]))
    assert contrast(INK) / contrast(darkest) > 4.5


def test_the_look_does_not_outlast_the_drawing() -> None:
    before = dict(rcParams)
    with styled():
        assert rcParams["svg.hashsalt"] == "gibbsmin"
    assert dict(rcParams) == before


@pytest.mark.parametrize(
    ("name", "written"),
    [
        ("Fe0.947O(s):wuestite", "Fe₀.₉₄₇O(s) wuestite"),
        ("Ca(OH)2(s)", "Ca(OH)₂(s)"),
        ("e-", "e⁻"),
        ("H3O+", "H₃O⁺"),
        ("2-butanol", "2-butanol"),
        ("", ""),
    ],
)
def test_formulas(name: str, written: str) -> None:
    assert formula(name) == written


def test_words_with_formulas_in_them() -> None:
    assert in_formulas("K in K2SO4(s)") == "K in K₂SO₄(s)"
    assert in_formulas("NOx at 3 % O2") == "NOx at 3 % O₂"
    assert in_formulas("EPA Method 19") == "EPA Method 19"


def test_units_and_inputs_in_words() -> None:
    assert unit_word("mg/Nm3") == "mg/Nm³"
    assert input_words("constraint.slip.sum") == "sum held of slip"
    assert input_words("stages.bed_1.approach.shift.temperature") == "approach temperature of shift"
    assert input_words("made_up") == "made up"
    assert input_unit("feeds.gas.recirculated_percent", "1") == "%"
    assert input_unit("feeds.gas.mole_ratio", "1") == ""


def test_what_is_held_leaves_out_what_is_varied() -> None:
    case = {"held": {"entropy": "from feeds", "isentropic_efficiency": 0.9, "pressure": "1 bar"}}
    assert held_title(case, []) == ", entropy of the feeds, isentropic efficiency 0.9, at 1 bar absolute"
    assert held_title(case, ["held.isentropic_efficiency"]) == ", entropy of the feeds, at 1 bar absolute"
    assert held_title({"held": {"heat": "-5 MW", "volume": "2 m3"}}, []) == ", heat -5 MW, volume 2 m³"
    assert held_title({}, []) == ""


def test_units_are_those_that_were_typed() -> None:
    case = {
        "held": {"temperature": 900.0, "pressure": "3 atm"},
        "feeds": {"a": {"temperature": "70 degF", "flow": "2 t/h"}},
    }
    assert typed_units(case, "mol/s") == {"temperature": "degF", "pressure": "atm", "amount": "kmol/h"}
    assert typed_units({}, "mol") == {"temperature": "K", "pressure": "Pa", "amount": "mol"}


@given(st.lists(st.floats(0.0, 200.0), max_size=12))
def test_labels_do_not_meet_and_stay_in_order(wanted: list[float]) -> None:
    places = np.array(spread(np.array(wanted), 11.0, 0.0, 200.0))
    order = np.argsort(wanted, kind="stable")
    gaps = np.diff(places[order])
    assert gaps.size == 0 or gaps.min() > 11.0 - 1e-9
    assert places.size == 0 or (places.min() > -1e-9 and places.max() < 200.0 + 1e-9)


@given(st.lists(st.floats(0.0, 1000.0), max_size=8, unique=True))
def test_labels_that_have_room_stay_where_they_are(wanted: list[float]) -> None:
    apart = np.sort(np.array(wanted))
    if apart.size < 2 or np.diff(apart).min() >= 11.0:
        assert spread(apart, 11.0, 0.0, 1000.0) == pytest.approx(list(apart))
