"""Designs: windows are what the whole is there, random points fill their ranges, and a seed gives them again."""

import itertools

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from gibbsmin.studies.designs import BLOCK, Design

SIZES = st.lists(st.integers(1, 6), min_size=1, max_size=5).map(tuple)


@st.composite
def windows(draw):
    kind = draw(st.sampled_from(["grid", "in step", "latin hypercube", "sobol"]))
    sizes = draw(SIZES)
    if kind != "grid":
        sizes = (draw(st.integers(2, 60)),) * len(sizes)
    design = Design(sizes, kind, draw(st.integers(0, 2**63 - 1)))
    start = draw(st.integers(0, design.states - 1))
    return design, start, draw(st.integers(start + 1, design.states))


@settings(max_examples=60, deadline=None)
@given(windows())
def test_a_window_is_a_slice_of_the_whole(case):
    design, start, stop = case
    whole, part = design.places(0, design.states), design.places(start, stop)
    assert len(part) == len(design.sizes)
    for column, all_of_it in zip(part, whole, strict=True):
        assert column.tolist() == all_of_it[start:stop].tolist()


@given(SIZES)
def test_a_grid_has_every_combination_the_last_input_fastest(sizes):
    design = Design(sizes)
    rows = list(zip(*(column.tolist() for column in design.places(0, design.states)), strict=True))
    assert rows == list(itertools.product(*map(range, sizes)))
    assert design.shape == sizes


def test_a_window_of_a_grid_far_too_large_for_memory():
    design = Design((10**4,) * 4)
    assert design.states == 10**16
    assert [int(column[0]) for column in design.places(10**14, 10**14 + 3)] == [100, 0, 0, 0]


def test_no_input_is_one_state():
    assert (Design().states, Design().shape, Design().places(0, 1)) == (1, (), [])


@settings(max_examples=20, deadline=None)
@given(st.integers(2, 300), st.integers(1, 6), st.integers(0, 1000))
def test_a_latin_hypercube_has_one_point_in_each_part_of_each_range(points, inputs, seed):
    for column in Design((points,) * inputs, "latin hypercube", seed).places(0, points):
        assert 0.0 <= column.min() <= column.max() <= 1.0
        parts = np.ceil(column * points).clip(1)  # the upper edge of a part is its own
        assert len(set(parts.tolist())) >= points - 1  # a point on an edge may be rounded into the next
        assert np.abs(np.sort(column) - (np.arange(points) + 0.5) / points).max() <= 0.5 / points + 1e-12


def test_a_sobol_sequence_is_even_over_powers_of_two():
    # A net in base 2 (Sobol 1967): 256 points put one in each of 256 equal strips, in every input, scrambled or not.
    for column in Design((256,) * 4, "sobol", 5).places(0, 256):
        assert sorted(np.floor(column * 256).astype(int).tolist()) == list(range(256))


def test_inputs_of_a_latin_hypercube_do_not_follow_each_other():
    columns = np.array(Design((4000,) * 4, "latin hypercube", 3).places(0, 4000))
    away = np.corrcoef(columns) - np.eye(4)
    assert np.abs(away).max() < 0.08  # five standard deviations of chance, 1 / sqrt(4000)


@pytest.mark.parametrize("kind", ["latin hypercube", "sobol"])
def test_a_seed_gives_the_same_points_again_and_another_does_not(kind):
    first = Design((50, 50), kind, 1).places(0, 50)
    other = Design((50, 50), kind, 2).places(0, 50)
    assert not np.array_equal(first, other)
    assert np.array_equal(first, Design((50, 50), kind, 1).places(0, 50))


def test_windows_over_the_seam_of_two_blocks_of_sobol():
    design = Design((2 * BLOCK + 10,) * 2, "sobol", 9)
    over = np.array(design.places(BLOCK - 5, 2 * BLOCK + 3))
    assert over.shape == (2, BLOCK + 8)
    one_by_one = np.hstack([np.array(design.places(k, k + 1)) for k in (BLOCK - 1, BLOCK, 2 * BLOCK + 2)])
    assert np.array_equal(over[:, [4, 5, BLOCK + 7]], one_by_one)
    # Over the whole of two blocks the net is even: each of BLOCK strips has two points.
    counts = np.bincount(np.floor(np.array(design.places(0, 2 * BLOCK))[0] * BLOCK).astype(int))
    assert set(counts.tolist()) == {2}
