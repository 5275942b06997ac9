"""Rows of core/tests/ray.rs for the refraction of one sight, 50 digits. Needs mpmath; the rows are committed."""
from mpmath import cos, mp, mpf, nstr, pi

mp.dps = 50
R = mpf(6371000)


def combined(s, q):
    return R * (cos(q * s / R) ** (-1 / q) - 1)


for s in (1, 100, 10000, 200000):
    for k in (1e-9, 0.13, 0.999, -2.5, 16.0):
        q = 1 - mpf(k)
        if abs(q * s / R) < pi / 2:
            print(f"({float(s)!r}, {k!r}, {nstr(combined(mpf(s), mpf(1)) - combined(mpf(s), q), 20)}),")
