"""The work of core/benches/line.rs in NumPy, for comparison: the same points, the same figures.

    python3 tests/tables/bench_line.py        # Needs numpy.
"""
import math
import time

import numpy

LENGTH, A, B, K, R = 50e3, 140.0, 180.0, 0.13, 6371000.0
ROUNDS = 25
# How far the parabola lies from this line at most, metres: twice what core/ computes for it.
OFF = 1e-3


def hill(n):
    states, state = numpy.empty(n), 1
    for i in range(n):
        state = (state * 1664525 + 1013904223) % 2**32
        states[i] = state
    share = (numpy.arange(n) + 0.5) / n
    return LENGTH * share, 100.0 - 240.0 * (share - 0.6) * (share - 0.6) + 3.0 * (states / 4294967296.0)


def height(x):
    q = 1 - K
    u = [math.expm1(-q * math.log1p(h / R)) for h in (A, B)]
    turn, rest = q / R * x, q / R * (LENGTH - x)
    ends = (u[0] * numpy.sin(rest) + u[1] * numpy.sin(turn)) / math.sin(q * LENGTH / R)
    bulge = 2 * numpy.sin(turn / 2) * numpy.sin(rest / 2) / math.cos(q * LENGTH / R / 2)
    return R * numpy.expm1(-numpy.log1p(ends + bulge) / q)


def least(at, top):
    bend = 2 * (A + B - 2 * height(LENGTH / 2)) / LENGTH**2
    clearance = A + at * ((B - A) / LENGTH - bend * LENGTH + at * bend) - top
    near = numpy.flatnonzero(clearance <= clearance.min() + 2 * OFF)
    exact = height(at[near]) - top[near]
    lowest = exact.argmin()
    return exact[lowest], at[near[lowest]]


def microseconds(work):
    times = []
    for _ in range(ROUNDS):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return min(times) * 1e6


print(f"{'points':>9} {'sums, µs':>12} {'least, µs':>12} {'ratio':>6} {'ns/point':>9}  least")
for n in (1000, 10_000, 100_000, 1_000_000, 4_000_000):
    at, top = hill(n)
    plain = microseconds(lambda: (at.sum(), top.sum()))
    took = microseconds(lambda: least(at, top))
    clearance, x = least(at, top)
    columns = f"{n:>9} {plain:>12.1f} {took:>12.1f} {took / plain:>6.2f} {took * 1e3 / n:>9.2f}"
    print(f"{columns}  {clearance:.9f} m at {x:.3f} m")
