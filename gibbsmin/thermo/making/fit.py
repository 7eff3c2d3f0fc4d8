r"""Polynomial pieces fitted to a table by least squares with equality constraints.

Unknowns of each segment are the terms c_p of Cp/R = sum c_p t^p with t = T/1000 K, and the two integration
constants. Minimised is the sum of squares of Cp, S and (H - H0)/T; exact are H and S at the anchor, and at each break

    smooth       Cp, H and S continuous       (a range split for the fit's sake)
    continuous   H and S continuous           (the peak of a lambda transition)
    jump         G continuous, H as tabulated (a first-order transition)

The bordered normal equations are solved in decimal arithmetic: 50 digits, so that their poor condition does no harm
and every machine gets the same coefficients.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal, localcontext
from math import hypot, inf

from gibbsmin.thermo.making.draft import rounded
from gibbsmin.thermo.making.sources import Row
from gibbsmin.thermo.record import R_OF_FIT, Piece

LADDER: tuple[tuple[int, ...], ...] = (
    (0,),
    (0, 1),
    (-2, 0, 1),
    (-2, 0, 1, 2),
    (-2, -1, 0, 1, 2),
    (-2, -1, 0, 1, 2, 3),
    (-2, -1, 0, 1, 2, 3, 4),
)
"""Powers of T in Cp, from the shortest fit to the longest."""

GOOD_ENOUGH = 0.05
"""Largest deviation of Cp [J/mol/K] at which a shorter fit is taken."""

WORTH_A_TERM = 0.97
"""A longer fit is taken only if it brings the root of the squared deviations down to this share."""

PRECISION = 50
_SCALE = Decimal(1000)
_R = Decimal(str(R_OF_FIT))

Vector = list[Decimal]


@dataclass(frozen=True)
class Segment:
    """One piece to be fitted: its range [K], rows of the table, how it starts, crystal form."""

    low: float
    high: float
    rows: Sequence[Row]
    start: str = "smooth"
    form: str = ""


def fit(segments: Sequence[Segment], anchor: tuple[float, float, float]) -> tuple[list[Piece], float]:
    """Fit the segments together.

    Parameters
    ----------
    segments : sequence of Segment
        In rising order, ends touching; ``Row.H`` counted from the zero that ``anchor`` uses, [J/mol].
    anchor : tuple of float
        Temperature [K], H [J/mol] and S [J/mol/K] that the first segment takes exactly.

    Returns
    -------
    pieces : list of Piece
    deviation : float
        Largest deviation of Cp from the rows, [J/mol/K].
    """
    powers = [_choose(segment) for segment in segments]
    pieces = _solve(segments, powers, anchor)
    return pieces, max(map(abs, _deviations(segments, pieces)))


def _choose(segment: Segment) -> tuple[int, ...]:
    """Choose powers for a segment, tried on it alone: the shortest that are good enough or no worse than more."""
    start = segment.rows[0]
    best, least = LADDER[0], inf
    for level in LADDER:
        powers = _affordable(level, segment)
        deviations = _deviations([segment], _solve([segment], [powers], (start.T, start.H, start.S)))
        total = hypot(*deviations)
        if total < WORTH_A_TERM * least:
            best, least = powers, total
        if max(map(abs, deviations)) < GOOD_ENOUGH:
            break
    return best


def _affordable(level: tuple[int, ...], segment: Segment) -> tuple[int, ...]:
    """Return the longest set of powers up to ``level`` with fewer terms than rows: nothing swings between them."""
    most = min(len(level), max(2, len(segment.rows) - 1))
    allowed = [powers for powers in LADDER if len(powers) <= most]
    return allowed[-1]


def _basis(T: float, powers: Sequence[int]) -> tuple[Vector, Vector, Vector]:
    """Cp/R, H/(1000 R) and S/R as linear forms in the powers' terms and the two constants."""
    t = Decimal(str(T)) / _SCALE
    log = t.ln()
    zero, one = Decimal(0), Decimal(1)
    cp = [t**p for p in powers] + [zero, zero]
    h = [log if p == -1 else t ** (p + 1) / (p + 1) for p in powers] + [one, zero]
    s = [log if p == 0 else t**p / p for p in powers] + [zero, one]
    return cp, h, s


def _solve(
    segments: Sequence[Segment], powers: Sequence[tuple[int, ...]], anchor: tuple[float, float, float]
) -> list[Piece]:
    with localcontext() as context:
        context.prec = PRECISION
        offsets = [0]
        for p in powers:
            offsets.append(offsets[-1] + len(p) + 2)
        n = offsets[-1]

        def spread(k: int, form: Vector, sign: int = 1) -> Vector:
            full = [Decimal(0)] * n
            full[offsets[k] : offsets[k + 1]] = [sign * x for x in form]
            return full

        equations: list[tuple[Vector, Decimal]] = []
        normal = [[Decimal(0)] * n for _ in range(n)]
        right = [Decimal(0)] * n
        T0, H0, S0 = anchor
        _, h, s = _basis(T0, powers[0])
        equations += [(spread(0, h), Decimal(str(H0)) / _R / _SCALE), (spread(0, s), Decimal(str(S0)) / _R)]
        for k, segment in enumerate(segments):
            for row in segment.rows:
                cp, h, s = _basis(row.T, powers[k])
                t = Decimal(str(row.T)) / _SCALE
                weighted = (
                    (cp, Decimal(str(row.Cp)) / _R),
                    (s, Decimal(str(row.S)) / _R),
                    ([x / t for x in h], Decimal(str(row.H)) / _R / _SCALE / t),
                )
                for form, value in weighted:
                    for i, x in enumerate(form):
                        right[offsets[k] + i] += x * value
                        for j, y in enumerate(form):
                            normal[offsets[k] + i][offsets[k] + j] += x * y
            if k:
                equations += _joint(segments, powers, k, spread)
        return _pieces(segments, powers, offsets, _bordered(normal, right, equations))


def _joint(
    segments: Sequence[Segment], powers: Sequence[tuple[int, ...]], k: int, spread: object
) -> list[tuple[Vector, Decimal]]:
    """Equations at the break below segment ``k``."""
    assert callable(spread)
    T, start = segments[k].low, segments[k].start
    below, above = _basis(T, powers[k - 1]), _basis(T, powers[k])

    def same(index: int) -> tuple[Vector, Decimal]:
        pair = zip(spread(k, above[index]), spread(k - 1, below[index], -1), strict=True)
        return [x + y for x, y in pair], Decimal(0)

    if start == "jump":
        H = next(row.H for row in segments[k].rows if row.T == T)
        t = Decimal(str(T)) / _SCALE
        gibbs = [h - t * s for h, s in zip(same(1)[0], same(2)[0], strict=True)]
        return [(spread(k, above[1]), Decimal(str(H)) / _R / _SCALE), (gibbs, Decimal(0))]
    return [same(1), same(2), same(0)] if start == "smooth" else [same(1), same(2)]


def _bordered(normal: list[Vector], right: Vector, equations: list[tuple[Vector, Decimal]]) -> Vector:
    """Solve [N E'; E 0] [x; y] = [r; e] by elimination with row pivoting."""
    n, m = len(right), len(equations)
    matrix = [[*normal[i], *(form[i] for form, _ in equations), right[i]] for i in range(n)]
    matrix += [[*form, *([Decimal(0)] * m), value] for form, value in equations]
    size = n + m
    for i in range(size):
        pivot = max(range(i, size), key=lambda r: abs(matrix[r][i]))
        matrix[i], matrix[pivot] = matrix[pivot], matrix[i]
        for r in range(i + 1, size):
            factor = matrix[r][i] / matrix[i][i]
            if factor:
                matrix[r] = [a - factor * b for a, b in zip(matrix[r], matrix[i], strict=True)]
    solution = [Decimal(0)] * size
    for i in reversed(range(size)):
        rest = sum((matrix[i][j] * solution[j] for j in range(i + 1, size)), Decimal(0))
        solution[i] = (matrix[i][size] - rest) / matrix[i][i]
    return solution[:n]


def _pieces(
    segments: Sequence[Segment], powers: Sequence[tuple[int, ...]], offsets: Sequence[int], x: Vector
) -> list[Piece]:
    """Coefficients in T instead of t."""
    pieces = []
    log = _SCALE.ln()
    for k, segment in enumerate(segments):
        own = x[offsets[k] : offsets[k + 1]]
        a = [Decimal(0)] * 9
        for p, c in zip(powers[k], own, strict=False):
            a[p + 2] = c / _SCALE**p
        a[7] = _SCALE * own[-2] - a[1] * log
        a[8] = own[-1] - a[2] * log
        pieces.append(Piece(segment.low, segment.high, tuple(rounded(float(c)) for c in a), segment.form))
    return pieces


def _deviations(segments: Sequence[Segment], pieces: Sequence[Piece]) -> list[float]:
    """Deviation of Cp from each row, [J/mol/K]."""
    return [
        R_OF_FIT * sum(c * row.T**p for c, p in zip(piece.coefficients[:7], range(-2, 5), strict=True)) - row.Cp
        for segment, piece in zip(segments, pieces, strict=True)
        for row in segment.rows
    ]
