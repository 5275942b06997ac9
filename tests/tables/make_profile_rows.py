"""Rows of core/tests/rows/profiles.tsv: whole profiles under a line, in 100-digit arithmetic.

    python3 tests/tables/make_profile_rows.py > core/tests/rows/profiles.tsv     # Needs mpmath; the rows are committed.

Columns: height at A; at B; distance; k; radius; clearance wanted; distances of the points; their tops; then least, least_at,
k_grazing, raise_a, raise_b, raise_both, each as FIGURE/SIZE. Each point is solved for by itself with the launching form of
make_line_rows.py, and the worst of them taken: nothing here knows how core/ finds it. SIZE is what core/ must add to come
to the figure, so that ulps of it are what it may be off by.
"""
from make_line_rows import RNG, height, mpf, nstr, solved, spread, terms

WANTED = [0.0] * 8 + [3.0] * 4


def ground(a, b, s, k, r, blocked):
    """Points as a spreadsheet would have them; a third of them stand above the line where it is `blocked`."""
    points = []
    for _ in range(RNG.randint(4, 40)):
        x = round(s * RNG.uniform(0.02, 0.98), 1)
        depth = spread(0.1, 60.0) if not blocked or RNG.random() < 0.66 else -spread(0.1, 15.0)
        points.append((x, round(float(height(a, b, s, x, k, r)) - depth, 2)))
    return points


def least(a, b, s, k, r, points):
    def at(point):
        return height(a, b, s, point[0], k, r) - mpf(point[1])

    x, top = min(points, key=at)
    return at((x, top)), terms(a, b, s, x, k, r) + abs(mpf(top)), x


def grazing_k(a, b, s, x, need, r):
    lever = mpf(x) * (mpf(s) - mpf(x)) / (2 * mpf(r))
    start = 1 - (mpf(a) + (mpf(b) - mpf(a)) * x / s - need) / lever
    k = solved(lambda k: height(a, b, s, x, k, r) - need, start)
    return k, (terms(a, b, s, x, k, r) + abs(need)) / lever


def raise_end(a, b, s, x, need, k, r):
    """Of the first station; the second is the first of the line turned about."""
    share = 1 - mpf(x) / s
    up = solved(lambda up: height(a + up, b, s, x, k, r) - need, (need - height(a, b, s, x, k, r)) / share)
    return up, abs(mpf(a)) + (abs(need) + terms(a + up, b, s, x, k, r)) / share


def raise_both(a, b, s, x, need, k, r):
    up = solved(lambda up: height(a + up, b + up, s, x, k, r) - need, need - height(a, b, s, x, k, r))
    return up, abs(need) + terms(a + up, b + up, s, x, k, r)


for number, wanted in enumerate(WANTED):
    a, b = (round(spread(20.0, 1500.0), 2) for _ in "ab")
    s = round(spread(1500.0, 60e3), 1)
    k = RNG.choice((0.13, 0.0, 1.0, round(RNG.uniform(-3, 3), 3)))
    r = RNG.choice((6371e3, round(RNG.uniform(6335e3, 6400e3), 0)))
    points = ground(a, b, s, k, r, blocked=number % 3 != 2)
    needs = [(x, mpf(top) + mpf(wanted)) for x, top in points]
    clearance, size, where = least(a, b, s, k, r, points)

    def worst(of):
        return max((of(x, need) for x, need in needs), key=lambda found: found[0])

    def lifted(of):
        up, size = worst(of)
        return max(up, mpf(0)), size

    figures = [
        (clearance, size),
        (mpf(where), mpf(where)),
        worst(lambda x, need: grazing_k(a, b, s, x, need, r)),
        lifted(lambda x, need: raise_end(a, b, s, x, need, k, r)),
        lifted(lambda x, need: raise_end(b, a, s, mpf(s) - mpf(x), need, k, r)),
        lifted(lambda x, need: raise_both(a, b, s, x, need, k, r)),
    ]
    lists = [" ".join(repr(point[i]) for point in points) for i in (0, 1)]
    said = [f"{nstr(figure, 20)}/{nstr(size, 5)}" for figure, size in figures]
    print(*(repr(n) for n in (a, b, s, k, r, wanted)), *lists, *said, sep="\t")
