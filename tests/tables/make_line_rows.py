"""Rows of core/tests/rows/line.tsv: the line over ground in 100-digit arithmetic.

    python3 tests/tables/make_line_rows.py > core/tests/rows/line.tsv     # Needs mpmath; the rows are committed.
    python3 tests/tables/make_line_rows.py 5000 > /tmp/line_hunt.tsv      # 5000 random rows a function: hunts for worse

Columns as in make_rows.py: function; arguments; reference, 25 digits; its residual in ulps; conditioning. The
reference is not the two-point form of core/ but the launching form: the elevation at the first station is found, then
the ray followed. `space` rows know nothing of rays: a straight line between two points in the plane through the
earth's centre (k = 0).
Conditioning: how many times larger than the result the sum of the terms is that core/ must add, ends and bulge apart.
"""
import random
import sys

from mpmath import atan, cos, exp, expm1, findroot, floor, log, log1p, mp, mpf, nstr, sin, tan

mp.dps = 100
COUNT = int(sys.argv[1]) if len(sys.argv) > 1 else 20
RNG = random.Random(20261203)

# The hardest arguments that some ten thousand random ones brought up, so that a promise meets them.
HARDEST = {
    "height": [
        (414.3454037561471, 652.034175272144, 2665.553966714977, 0.018689641152543814, -9.351383852682721, 6371000.0),
    ],
    "space": [(65.05158945340126, 29.839275299111403, 250.04473247854435, 17.163052313895477, 6371000.0)],
    "handbook": [(1.6, 1.6, 27965.057425123043, 6010.654998105619, -0.6226754215518518, 6392597.946760185)],
    "grazing_k": [
        (1.6, -24.37175252071122, 151006.68966633704, 75503.34483316852, -458.77863318481633, 0.14862998846962044,
         6371e3),
    ],
    "raise_a": [
        (1.6, 33.40336771672925, 2129.593696672974, 1275.5926167183798, 20.63227832841812, 0.6948254367249616, 0.0,
         6371e3),
    ],
    "raise_both": [
        (3.706795329613842, -3.728281095485649, 134.08544146645897, 67.04272073322949, -0.020725787960094746,
         7.736768129877205, -27.163345969812752, 6360351.824017308),
    ],
}


def ulp(x):
    return 2.0 ** (int(floor(log(abs(mpf(x)), 2))) - 52)


def emit(function, arguments, reference, conditioning):
    near = float(reference)
    residual = 0 if near == 0 else (reference - mpf(near)) / mpf(ulp(near))
    arguments = "\t".join(repr(a) for a in arguments)
    print(function, arguments, nstr(reference, 25), nstr(residual, 3), nstr(max(mpf(1), conditioning), 3), sep="\t")


def height(a, b, s, x, k, r):
    """Launched at the first station so that the second is met."""
    a, b, s, x, k, r = map(mpf, (a, b, s, x, k, r))
    q, all_, part, start = 1 - k, s / r, x / r, r + a
    rise = log1p((b - a) / start)
    if q == 0:
        return start * exp(rise * part / all_) - r
    slope = (-2 * sin(q * all_ / 2) ** 2 - expm1(-q * rise)) / sin(q * all_)
    elevation = atan(slope)
    return start * (cos(elevation + q * part) / cos(elevation)) ** (-1 / q) - r


def space(a, b, s, x, r):
    """Where the straight line between the stations meets the plumb line at x: two by two equations."""
    a, b, s, x, r = map(mpf, (a, b, s, x, r))
    one, two = (r + a, mpf(0)), ((r + b) * cos(s / r), (r + b) * sin(s / r))
    c, d = cos(x / r), sin(x / r)
    dx, dy = two[0] - one[0], two[1] - one[1]
    return (one[0] * dy - one[1] * dx) / (c * dy - d * dx) - r


def bulge(s, x, k, r):
    return abs((1 - mpf(k)) * mpf(x) * (mpf(s) - mpf(x)) / (2 * mpf(r)))


def terms(a, b, s, x, k, r):
    share = mpf(x) / mpf(s)
    return abs(mpf(a)) * (1 - share) + abs(mpf(b)) * share + bulge(s, x, k, r)


def spread(low, high):
    """Even in the logarithm."""
    return low * (high / low) ** RNG.random()


def stations():
    level = RNG.choice((1.6, spread(1.0, 4000.0)))
    return [level + RNG.choice((0.0, spread(0.5, 2000.0), -spread(0.5, 300.0))) for _ in "ab"]


def line(shallow):
    a, b = stations()
    s = spread(10.0, 200e3)
    x = s * RNG.choice((RNG.random(), spread(1e-6, 1.0), 1 - spread(1e-6, 1.0), 0.5))
    r = RNG.choice((6371e3, RNG.uniform(6335e3, 6400e3)))
    size = spread(1e-3, 100.0) * RNG.choice((-1, 1))
    k = RNG.choice((size, 1 + size, RNG.uniform(-1, 2), 0.13, 0.0, 1.0, 1 - 2.0**-53))
    if abs(1 - k) * s / r > shallow:
        k = 1 - (1 - k) / abs(1 - k) * RNG.uniform(0, shallow) * r / s
    return a, b, s, min(max(x, 1e-6 * s), s * (1 - 1e-6)), k, r


def solved(of, start):
    """A root of a smooth function, good to the last of 100 digits; none where the search leaves what rays reach."""
    try:
        return findroot(of, (start, start + mpf(1e-3)), tol=mpf(10) ** -180, maxsteps=60)
    except (TypeError, ValueError):
        return None


def rows(function):
    a, b, s, x, k, r = line(0.1 if function in ("grazing_k", "raise_a", "raise_both") else 1.0)
    top = float(height(a, b, s, x, k, r)) + RNG.choice((0.0, spread(0.01, 100.0)))
    return {
        "height": (a, b, s, x, k, r),
        "handbook": (a, b, s, x, k, r),
        "space": (a, b, s, x, r),
        "grazing_k": (a, b, s, x, top, spread(0.1, 10.0), r),
        "raise_a": (a, b, s, x, top, spread(0.1, 10.0), k, r),
        "raise_both": (a, b, s, x, top, spread(0.1, 10.0), k, r),
    }[function]


def reference(function, n):
    if function == "height":
        value = height(*n)
        return value, terms(*n) / abs(value)
    if function == "handbook":
        a, b, s, x, k, r = map(mpf, n)
        value = a + (b - a) * x / s - (1 - k) * x * (s - x) / (2 * r)
        return value, (terms(*n) + abs(a)) / abs(value)
    if function == "space":
        a, b, s, x, r = n
        value = space(*n)
        return value, terms(a, b, s, x, 0.0, r) / abs(value)
    a, b, s, x, top, wanted = n[:6]
    need, r = mpf(top) + mpf(wanted), n[-1]
    if function == "grazing_k":
        lever = mpf(x) * (mpf(s) - mpf(x)) / (2 * mpf(r))
        start = 1 - (mpf(a) + (mpf(b) - mpf(a)) * x / s - need) / lever
        if abs(start) > 100 or abs(1 - start) * s / r > 0.5:
            return None
        value = solved(lambda k: height(a, b, s, x, k, r) - need, start)
        if value is None or abs(value) > 100:
            return None
        return value, (terms(a, b, s, x, value, r) + abs(need)) / lever / max(abs(value), mpf(1) / 1000)
    k = n[6]
    if function == "raise_a":
        start = (need - height(a, b, s, x, k, r)) / (1 - mpf(x) / s)
        if start > 1e5:
            return None
        value = solved(lambda up: height(a + up, b, s, x, k, r) - need, start)
        if value is None:
            return None
        lifted = abs(a) + (abs(need) + terms(a + value, b, s, x, k, r)) / (1 - mpf(x) / s)
        return value, lifted / abs(value)
    value = solved(lambda up: height(a + up, b + up, s, x, k, r) - need, need - height(a, b, s, x, k, r))
    if value is None:
        return None
    return value, (abs(need) + terms(a + value, b + value, s, x, k, r)) / abs(value)


if __name__ == "__main__":
    for function in HARDEST:
        made = 0
        for arguments in HARDEST[function]:
            emit(function, arguments, *reference(function, arguments))
        while made < COUNT:
            arguments = rows(function)
            found = reference(function, arguments)
            if found is not None:
                made += 1
                emit(function, arguments, *found)
