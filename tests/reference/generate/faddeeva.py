"""Values of w(z) = exp(-z^2) erfc(-iz) in 50-digit arithmetic, for tests/reference/data/faddeeva.json. Needs Debian's python3-mpmath; run by hand."""
import json
import mpmath as mp

mp.mp.dps = 50


def w(x, y):
    z = mp.mpc(x, y)
    if abs(z) < 40:
        return mp.exp(-z * z) * mp.erfc(mp.mpc(0, -1) * z)
    # exp(-z^2) is not needed where the asymptotic series is exact to 50 digits (Abramowitz & Stegun 7.1.23)
    total = term = mp.mpc(1)
    for n in range(1, 60):
        term *= (2 * n - 1) / (2 * z * z)
        total += term
    return mp.mpc(0, 1) / (mp.sqrt(mp.pi) * z) * total


cases = []
for y in [1e-9, 1e-6, 1e-3, 0.05, 0.3, 1.0, 3.0, 6.25, 6.5, 20.0, 1000.0]:
    for x in [0.0, 0.125, 0.25, 0.375, 0.7, 1.3, 2.0, 3.1, 4.5, 5.25, 6.6, 9.0, 12.2, 12.3, 30.0, 100.0, 1e4]:
        value = w(x, y)
        cases.append([x, y, float(value.real), float(value.imag)])
header = {
    'title': 'Faddeeva function w(x + iy)',
    'columns': ['x', 'y', 'Re w', 'Im w'],
    'method': 'mpmath, 50 digits, exp(-z^2) erfc(-iz), asymptotic series from |z| = 40',
    'tolerance': '1e-13 of the real part, 1e-14 of |w| for the imaginary part',
    'grade': 'computed',
}
print(json.dumps({'header': header, 'cases': cases}))
