"""The minimizer: arrays in, arrays out, compiled. It knows nothing of names, units or files.

The problem
-----------
Indices: i element, j species, c pure condensed species. Symbols: A (m, S) atoms of i in j; b (m,) element amounts
[mol]; n (S,) amounts [mol]; g (S,) standard potentials G°/RT, for a gas with ln(P/P°) added [-]; lam (m,) element
potentials [-]. One ideal gas and any number of pure condensed species:

    min  sum_j n_j mu_j/RT   with   A n = b,  n >= 0                                                        (1)
         mu_j/RT = g_j + ln(n_j/N) in the gas, N its amount;  mu_c/RT = g_c

is White, Johnson & Dantzig's problem (J. Chem. Phys. 28 (1958) 751). Its dual is a geometric programme (Duffin,
Peterson & Zener, Geometric Programming, Wiley 1967) in lam only:

    max  b.lam   with   a_c.lam <= g_c                             for every condensed species              (2)
                        X(lam) = sum_gas exp(a_j.lam - g_j) <= 1   for the gas                              (3)

Both are convex. The multipliers of (2) and (3) are the amounts of the condensed species and of the gas, and
ln x_j = a_j.lam - g_j for every gas species, however rare. A pair (n, lam) that satisfies all constraints with
sum_j n_j mu_j/RT = b.lam is the global minimum: that is what a certificate states.

A constant may be added to any g_j (``offset``): it shifts the equilibrium constants of the reactions in which the
species takes part, and nothing else. Rows of A need not be elements: one with any coefficients and its own b is a
linear constraint on amounts, and its lam is the price of that constraint.

How it is solved
----------------
Coordinates. A basis of r = rank(A) species with B = A[:, basis]; nu_j = B^-1 a_j, y the logarithms of the activities
of the basis species, u_j = nu_j.y - d_j the logarithm of the activity of species j, d_j = g_j - nu_j.g_B,
c = B^-1 b. At the end lam = B^-T (g_B + y). Large numbers cancel once, in d, and not in every step.      (4)

Basis. Condensed species that are present are always in the basis: their y is zero and their amount is what the
gas leaves of c. What remains is Newton's method in the other coordinates ("free") and ln N:

    F_i = sum_gas nu_ij n_j - c_i = 0  for free i,   ln X = 0,   n_j = N exp(u_j)                           (5)

    [ H    s ] [dy   ]   [ -F        ]     H = sum_gas n_j nu_j nu_j^T,  s = sum_gas n_j nu_j
    [ s^T  0 ] [dlnN ] = [ -N X ln X ]                                                                      (6)

Other held pairs. With the temperature unknown, tau = d ln T, e_j = H°_j/RT, de_j = e_j - nu_j.e_B and Cp°_j/R, the
energy of the mixture is H/RT = c.e_B + sum_gas n_j de_j where the balances hold, and

    E = H/RT - (held H)/RT = 0        (held enthalpy)          E = H/RT - c.(g_B + y) - (held S)/R = 0  (entropy)   (7)

joins (5). Since du_j = nu_j.dy + de_j tau it adds to (6) the border

    p = sum_gas n_j de_j nu_j,  q = sum_gas n_j de_j,  r = sum_gas n_j de_j^2 + Cp/R - E                            (8)

(for a held entropy p_i - c_i stands in the row and r = sum_gas n_j de_j^2 + Cp/R - q). At held volume n_j = exp(u_j)
with g_j = G°_j/RT + ln(RT/(P° V)), there is no ln N, and internal energies stand for enthalpies. In beta = 1/T the
energy programme is convex where Cp > 0. At the temperature where two condensed species coexist, `phase_set` lets one
more in beside the basis: a plateau, on which its amount is the unknown that T is not.

Files, in the order in which they are used: `layout` (the arrays), `candidates`, `simplex` (the basis of the linear
programme, each species taken as a pure phase: a start that has the right condensed species in most cases), `basis`
(coordinates and their exchange), `gas` (activities and balances), `energy` (7, 8), `newton` (5, 6), `phase_set` (which
condensed species are present, and whether there is a gas), `settle` (the iteration), `warmth` (a first
temperature), `one_state`, `certificate`, `outcome`, `minimize` (many states), `status` (what an outcome means).
"""
