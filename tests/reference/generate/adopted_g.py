"""Lines between two LS terms whose levels have g_J of their own, for tests/reference/data/adopted-g-lines.json. H = sum_J E_J P_J + mu_B B (L_z + g_s S_z
+ sum_J (g_J - g_J(LS)) P_J J_z P_J) as a matrix in |M_L M_S>, diagonalised by LAPACK. Needs Debian's python3-numpy and python3-sympy; run by hand."""
import json
from math import sqrt

import numpy as np
from sympy.physics.wigner import wigner_3j

MU, GS = 0.46686447719, 2.00231930436092


def operators(two):
    n, j = two + 1, two / 2
    m = [-j + i for i in range(n)]
    raising = np.zeros((n, n))
    for i in range(n - 1):
        raising[i + 1, i] = sqrt(j * (j + 1) - m[i] * (m[i] + 1))
    return np.diag(m), raising


def solve(term, field):
    two_s, l = term['twoS'], term['L']
    (lz, lp), (sz, sp) = operators(2 * l), operators(two_s)
    el, es = np.eye(2 * l + 1), np.eye(two_s + 1)
    jz, jp = np.kron(lz, es) + np.kron(el, sz), np.kron(lp, es) + np.kron(el, sp)
    j2 = jz @ jz + (jp @ jp.T + jp.T @ jp) / 2
    w, v = np.linalg.eigh(j2)
    mean = sum(e for _, e, _ in term['levels']) / len(term['levels'])
    h0, field_part = np.zeros_like(j2), np.kron(lz, es) + GS * np.kron(el, sz)
    for two_j, energy, g in term['levels']:
        j, s = two_j / 2, two_s / 2
        own = v[:, abs(w - j * (j + 1)) < 1e-6]
        projector = own @ own.T
        h0 += (energy - mean) * projector
        if two_j > 0:
            a, b, c = j * (j + 1), l * (l + 1), s * (s + 1)
            ls = (a + b - c) / (2 * a) + GS * (a + c - b) / (2 * a)
            field_part = field_part + (g - ls) * projector @ jz @ projector
    h = h0 + MU * field * field_part
    states, m = {}, np.rint(2 * np.diag(jz)).astype(int)
    for two_m in sorted(set(m)):
        block = np.where(m == two_m)[0]
        e, u = np.linalg.eigh(h[np.ix_(block, block)])
        for k in range(len(block)):
            full = np.zeros(len(m))
            full[block] = u[:, k]
            states[int(two_m), k + 1] = (e[k], full, full @ field_part @ full)
    return states, mean


def dipole(lower, upper, two_s, q):
    orbit = np.zeros((2 * upper + 1, 2 * lower + 1))
    for m in range(-lower, lower + 1):
        if abs(m + q) <= upper:
            orbit[m + q + upper, m + lower] = (-1) ** (upper - m - q) * float(wigner_3j(upper, 1, lower, -m - q, q, m))
    return np.kron(orbit, np.eye(two_s + 1))


pairs = [
    ('3P-3D', {'twoS': 2, 'L': 1, 'levels': [[0, 0.0, 0.0], [2, 10.3, 1.4987], [4, 31.7, 1.5123]]}, {'twoS': 2, 'L': 2, 'levels': [[2, 20005.1, 0.52], [4, 20000.4, 1.18], [6, 20012.9, 1.3301]]}),
    ('2D-2P', {'twoS': 1, 'L': 2, 'levels': [[3, 0.0, 0.81], [5, 4.2, 1.19]]}, {'twoS': 1, 'L': 1, 'levels': [[1, 15000.0, 0.67], [3, 15001.1, 1.33]]}),
]
cases = []
for name, lower, upper in pairs:
    for field in [0.5, 12.0, 1000.0]:
        (low, low_mean), (high, high_mean) = solve(lower, field), solve(upper, field)
        rows = []
        for q in (-1, 0, 1):
            d = dipole(lower['L'], upper['L'], lower['twoS'], q)
            for (m, k), (e, vector, slope) in low.items():
                for (mu, ku), (eu, other, slope_u) in high.items():
                    if mu == m + 2 * q:
                        rows.append([m, k, mu, ku, (high_mean - low_mean) + (eu - e), (other @ d @ vector) ** 2 / (lower['twoS'] + 1), MU * (slope_u - slope)])
        cases.append({'lines': name, 'B': field, 'lower': lower, 'upper': upper, 'components': rows})
header = {
    'title': 'Lines between LS terms with g_J of their own',
    'columns': {'levels': ['twoJ', 'E_J cm^-1', 'g_J'], 'components': ['twoMLower', 'kLower', 'twoMUpper', 'kUpper', 'wavenumber cm^-1', 'strength', 'derivative cm^-1/T']},
    'conventions': 'g_s = 2.00231930436092, g_L = 1; k counts the states of one M upwards; all strengths of one field sum to 1; energies and g invented',
    'method': 'matrices in |M_L M_S>, LAPACK; 3j symbols of SymPy',
    'tolerance': 'wavenumber 1e-9, strength 1e-10, derivative 1e-9',
    'grade': 'computed',
}
print(json.dumps({'header': header, 'cases': cases}))
