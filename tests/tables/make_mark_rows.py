"""Rows of tests/tables/peg.tsv and one_mark.tsv that no handbook has: 50-digit arithmetic, by other ways than core/.

    python3 tests/tables/make_mark_rows.py peg          # Needs mpmath; the rows are committed.
    python3 tests/tables/make_mark_rows.py one_mark

Peg test: the four readings as four linear equations in the height of the line at each station, the rise of B over A and
the collimation error, solved as they stand. Levels from one mark: the plain form of the ray, the root and the least
value searched by bisection and by ever finer grids.
"""
import random
import sys

from mpmath import cos, findroot, lu_solve, matrix, mp, mpf, nstr, sqrt, tan

mp.dps = 50
RNG = random.Random(20261204)
R = mpf(6371000)
ARC_SECOND = tan(mp.pi / 648000)


def combined(s, k):
    """How far the ray n ~ r^(-k) stands above the level surface."""
    q = 1 - mpf(k)
    return R * (cos(q * mpf(s) / R) ** (-1 / q) - 1) if q else mpf(0)


def curvature(s):
    return R / cos(mpf(s) / R) - R


def emit(entry, what, value, tolerance, source):
    print(entry, what, nstr(value, 15), tolerance, source, sep="\t")


# --- the two-peg test -------------------------------------------------------------------------------------------------


def peg(k, distances, readings, note):
    """reading = height of the line − height of the peg + s d + C(d); unknown: both lines (over peg A), rise, s."""
    (a, b, c, d) = [mpf(x) for x in distances]
    system = matrix([[1, 0, 0, a], [1, 0, -1, b], [0, 1, 0, c], [0, 1, -1, d]])
    seen = matrix([mpf(x) - combined(y, k) for x, y in zip(readings, distances)])
    line1, line2, rise, s = lu_solve(system, seen)
    entry = "layout=measured" + "".join(
        f"&{name}={value}"
        for name, value in zip(
            ("first_distance_a", "first_distance_b", "second_distance_a", "second_distance_b", "first_a", "first_b",
             "second_a", "second_b"), (*distances, *readings)))
    entry += f"&k={k} k&k_doubt=0&radius=6371"
    for what, value, tolerance in (
        ("collimation", s, "2e-16"),
        ("rise", rise, "2e-15"),
        ("set_a", mpf(readings[2]) - s * c, "1e-14"),
        ("imbalance_cost", 10 * s, "2e-15"),
    ):
        emit(entry, what, value, tolerance, f"50-digit arithmetic, four linear equations; {note}")


def pegs():
    peg("0.13", ("26", "24", "55", "5"), ("1.2830", "0.8600", "1.6120", "1.2190"), "unequal distances at the first station")
    peg("-2.5", ("3", "42", "41", "4.5"), ("1.5310", "1.2104", "1.6632", "1.3448"), "near each peg, hot ground")
    peg("3", ("20", "20", "8", "48"), ("-0.4210", "1.3370", "-0.3980", "1.3600"), "beyond A, a staff head down, k above 1")


# --- levels from one mark ---------------------------------------------------------------------------------------------


class Work:
    """Bias and doubt of a level set out, as the question declares them."""

    def __init__(self, k, u_k, rho, alpha, u_alpha, u_0, growth, u_d):
        self.k, self.u_k, self.rho = mpf(k), mpf(u_k), mpf(rho)
        self.alpha, self.u_alpha, self.u_0, self.growth, self.u_d = (mpf(x) for x in (alpha, u_alpha, u_0, growth, u_d))

    def bias(self, work, mark):
        return combined(work, self.k) - combined(mark, self.k) + self.alpha * (work - mark)

    def worst(self, work, mark):
        work, mark = mpf(work), mpf(mark)
        bias = self.bias(work, mark)
        sides = []
        for sign in (1, -1):
            # More is read where k is low: what both sights gain alike falls out but for the difference.
            def gain(s, side):
                return abs(combined(s, self.k + side * self.u_k) - combined(s, self.k))

            near, far = gain(mark, sign), gain(work, -sign)
            shared = max(0, gain(work, -1) - gain(mark, -1), gain(mark, 1) - gain(work, 1))
            if sign < 0:
                shared = max(0, gain(work, 1) - gain(mark, 1), gain(mark, -1) - gain(work, -1))
            air = self.rho * shared**2 + (1 - self.rho) * (far**2 + near**2)
            read = sum(self.u_0**2 + (self.growth * s) ** 2 for s in (work, mark))
            slope = sum((((1 - self.k) * s / R + self.alpha) * s * self.u_d) ** 2 for s in (work, mark))
            level = (self.u_alpha * (work - mark)) ** 2
            sides.append(sqrt(air + read + slope + level))
        above, below = sides
        return max(bias + above, below - bias)

    def entry(self):
        return (f"&k={nstr(self.k, 6)} k&k_doubt={nstr(self.u_k, 6)}&k_shared={nstr(self.rho * 100, 6)} %"
                f"&collimation={nstr(self.alpha * 1000, 6)}&collimation_doubt={nstr(self.u_alpha * 1000, 6)}"
                f"&reading_doubt={nstr(self.u_0 * 1000, 6)}&reading_growth={nstr(self.growth * 1000, 6)}"
                f"&distance_doubt={nstr(self.u_d * 100, 6)} %&radius=6371")

    def radius(self, mark, allowed):
        """First distance beyond the mark at which the farther end of the range is what is allowed."""
        low = mpf(mark)
        while self.worst(low, mark) <= allowed:
            low += mpf("0.5")
        return findroot(lambda d: self.worst(d, mark) - allowed, (low - mpf("0.5"), low), solver="anderson", tol=1e-60)

    def best(self, works):
        """Ever finer grids."""
        low, high = mpf(1), mpf(max(works))
        for _ in range(14):
            grid = [low + (high - low) * i / 40 for i in range(41)]
            cost = [max(self.worst(work, mark) for work in works) for mark in grid]
            at = cost.index(min(cost))
            low, high = grid[max(at - 1, 0)], grid[min(at + 1, 40)]
        return (low + high) / 2, min(cost)


def one_marks():
    cases = (
        (Work("0.13", "0", "0.5", "0", "0", "0", "0", "0"), 30, 10, 50, (300, 500)),
        (Work("-2.5", "2.6", "0.5", "0.00003", "0.00002", "0.0005", "0.00001", "0.05"), 30, 10, 50, (60, 120, 250)),
        (Work("-0.5", "1.2", "0.8", "-0.00004", "0.00001", "0.0003", "0.00002", "0.02"), 80, 12, 100, (50, 150, 200)),
        (Work("0.13", "0.5", "0", "0.00005", "0", "0.001", "0", "0"), 150, 20, 50, (100, 200, 400)),
    )
    note = "share of the tolerance met by |bias| + doubt: 50-digit arithmetic, root by bracketing"
    for work, mark, tolerance, share, works in cases:
        entry = f"mark_distance={mark}&tolerance={tolerance}&share={share} %"
        entry += "&work_distances=" + "\\n".join(str(w) + ("\\t" if i == 0 else "") for i, w in enumerate(works)) + work.entry()
        allowed = mpf(tolerance) * share / 100000
        emit(entry, "finish_radius", work.radius(mark, allowed), "1e-8", note)
        emit(entry, "error", work.bias(mpf(works[-1]), mpf(mark)), "1e-15", "50-digit arithmetic, ray n ~ r^-k")
        best, worst = work.best(works)
        emit(entry, "best_mark_distance", best, "0.001", "ever finer grids, 50-digit arithmetic; a part in 10⁶ is promised")
        emit(entry, "best_mark_worst", worst, "1e-8", "the same")


{"peg": pegs, "one_mark": one_marks}[sys.argv[1]]()
