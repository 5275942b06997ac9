"""Rows of core/tests/rows/net.tsv: level nets by a general least-squares routine, and ranges of a standard deviation.

    python3 tests/tables/make_level_net.py > core/tests/rows/net.tsv      # Needs numpy and scipy; the rows are committed.

Columns, by the first one:
    mark    net, number, "known" or "free", level: given where known, else adjusted by numpy.linalg.lstsq (singular
            values) on the weighted observation equations; no normal equations are formed
    line    net, from, to, rise, length
    sum     net, observations to spare, standard deviation of an observation of length 1 ("none" where none is spare)
    range   n, sqrt(n / chi2) at 97.5 % and at 2.5 %: scipy.stats.chi2
"""
import random

import numpy
from scipy.stats import chi2

RNG = random.Random(20261201)


def adjust(known, free, lines):
    """Levels of the free marks, and the standard deviation of an observation of length 1."""
    column = {mark: i for i, mark in enumerate(free)}
    matrix, right = numpy.zeros((len(lines), len(free))), numpy.zeros(len(lines))
    for row, (start, end, rise, length) in enumerate(lines):
        weight = length**-0.5
        right[row] = rise * weight
        for mark, sign in ((start, -1), (end, 1)):
            if mark in column:
                matrix[row, column[mark]] += sign * weight
            else:
                right[row] -= sign * weight * known[mark]
    levels, _, rank, _ = numpy.linalg.lstsq(matrix, right, rcond=None)
    assert rank == len(free)
    spare = len(lines) - len(free)
    rest = matrix @ levels - right
    return dict(zip(free, levels)), spare, (float(rest @ rest) / spare) ** 0.5 if spare else None


def net(name, truth, known, pairs, height):
    """A net over marks of heights `truth`, observed along `pairs` of (from, to, length in m)."""
    lines = []
    for start, end, length in pairs:
        noise = RNG.gauss(0, 0.002 * (length / 1000) ** 0.5)
        lines.append((start, end, round(truth[end] - truth[start] + noise, 4), length))
    given = {mark: round(truth[mark], 3) + height for mark in known}
    free = [mark for mark in range(len(truth)) if mark not in given]
    found, spare, deviation = adjust(given, free, lines)
    for mark in range(len(truth)):
        kind, level = ("known", given[mark]) if mark in given else ("free", float(found[mark]))
        print("mark", name, mark, kind, repr(level), sep="\t")
    for line in lines:
        print("line", name, *line, sep="\t")
    print("sum", name, spare, "none" if deviation is None else repr(deviation), sep="\t")


def heights(count):
    return [RNG.uniform(0, 60) for _ in range(count)]


def far():
    return round(RNG.uniform(80, 2500), 1)


def main():
    net("one line", heights(2), [0], [(0, 1, 412.5)], 0)
    net("between two marks", heights(6), [0, 5], [(i, i + 1, far()) for i in range(5)], 100)
    loops = [(0, 1), (1, 2), (2, 3), (3, 0), (0, 2), (1, 3), (3, 4), (4, 2)]
    net("loops", heights(5), [0], [(a, b, far()) for a, b in loops], 0)
    there = [(i, i + 1, far()) for i in range(40)]
    net("there and back", heights(41), [0], there + [(b, a, length) for a, b, length in reversed(there)], 1800)
    pairs = [(i, i + 1) for i in range(59)] + [tuple(RNG.sample(range(60), 2)) for _ in range(60)]
    net("tangled", heights(60), [7, 31, 58], [(a, b, far()) for a, b in pairs], 400)
    grid = [(10 * i + j, 10 * i + j + 1) for i in range(10) for j in range(9)]
    grid += [(10 * i + j, 10 * i + j + 10) for i in range(9) for j in range(10)]
    net("grid below the sea", heights(100), [0, 99], [(a, b, far()) for a, b in grid], -390)
    for n in [*range(1, 13), 20, 50, 200]:
        print("range", n, repr(float((n / chi2.ppf(0.975, n)) ** 0.5)), repr(float((n / chi2.ppf(0.025, n)) ** 0.5)), sep="\t")


main()
