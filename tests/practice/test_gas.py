"""Gas analysis and carbon activity against arithmetic done by hand."""

from __future__ import annotations

import pytest

from gibbsmin.practice.gas import dry


def test_dry_basis() -> None:
    found = dry({"H2": 0.494, "H2O": 0.325, "CO": 0.181})
    assert found["H2"] == pytest.approx(0.494 / 0.675)
    assert sum(found.values()) == pytest.approx(1.0)
    assert "H2O" not in found


def test_steam_alone_has_no_dry_gas() -> None:
    assert dry({"H2O": 1.0}) == {}
