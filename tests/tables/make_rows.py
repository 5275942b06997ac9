"""Rows of core/tests/rows/accuracy.tsv: every closed form of core/ in 80-digit arithmetic over its declared range.

    python3 tests/tables/make_rows.py > core/tests/rows/accuracy.tsv      # Needs mpmath; the rows are committed.
    python3 tests/tables/make_rows.py 5000 > /tmp/hunt.tsv                # 5000 random rows a function: hunts for worse

Columns: function; arguments, each the shortest text of the f64 that is used; reference, 25 digits; its residual (the
reference minus the f64 nearest to it, in ulps of that f64); conditioning. An error is counted in ulps of the reference
times the conditioning, which is 1 but for what no arithmetic in f64 can keep: sums that cancel, angles near upright.
The formulas are the plain ones of the definitions, not the stable ones of core/: 80 digits bear the cancellation.
"""
import pathlib
import random
import re
import sys

from mpmath import acos, atan, cos, log, mp, mpf, nstr, pi, sin, sqrt, tan

mp.dps = 80
COUNT = int(sys.argv[1]) if len(sys.argv) > 1 else 12
RNG = random.Random(20261201)
RADII = (6335e3, 6371e3, 6400e3)
LENGTHS = (1.0, 30.0, 1000.0, 10_000.0, 200_000.0)
COEFFICIENTS = (-100.0, -14.0, -2.5, -1e-9, 0.0, 1e-9, 0.13, 1 / 7, 0.5, 0.999, 1 - 2**-53, 1.0, 1.001, 2.0, 16.0, 100.0)

# The hardest arguments that some hundred thousand random ones brought up (see above), so that a promise meets them.
HARDEST = {
    "curvature": [(27.49014994051688, 6371e3), (101880.05838717779, 6337359.897224819)],
    "ray": [
        (54005.227251374505, -0.020890281382000567, 6382226.159493451),
        (255.33315379887043, 0.08092585591246516, 6394075.09766573),
        (39.04168073228248, -0.015879865183548336, 6371e3),
        (97.91294882263492, 1.229435263747764, 6370707.591335245),
        (27752.889149436298, 60.708077750876924, 6371e3),
        (52624.54813970574, 67.27467435717139, 6371e3),
        (97454.289962017, -68.26521309596431, 6371e3),
        (50817.28506361009, -19.534448386811004, 6371e3),
    ],
    "handbook": [(1.9806939533099286, -0.40313646571085704, 6375914.567234138)],
    "horizon": [
        (99.78631287279133, -0.0021119570268580542, 6357822.857500528),
        (1093.8873055474176, 0.9868087985355586, 6342585.194367794),
        (1709.6356411780837, -0.3160725844294233, 6371e3),
    ],
    "dip_short": [(6.835503905926548, 55.21417556390168, -0.8108515968069072, 6394548.530128381)],
    "hidden": [
        (1597.8421799679145, 141584.41609857656, -0.015776183012838216, 6359509.074106402),
        (12.493583074006345, 818226.6040354739, -3.61851480587771, 6371e3),
    ],
    "visible_range": [(1093.8873055474176, 0.5303280542808574, 0.9868087985355586, 6342585.194367794)],
    "reach": [(0.005093488472614259, 0.0, 0.00018100589673072495, 2.9141550994973156e-05, 0.13288327284217172, 6371e3)],
    "imbalance": [
        (0.049669250331002834, 1.3210674589553446, 0.00018715073202861684, 0.0, 0.0, 0.0588299561849624,
         0.5581357204984028, 6337520.687794535),
    ],
    "angle": [("″", 47.61271516933374, 1e-5), ("mgon", 0.1, 7.687223669560215e-06)],
    "guide": [(17.188695539571967,), (52.05523699485769,), (52.25261604751817,)],
}


def emit(function, arguments, reference, conditioning=1):
    arguments = "\t".join(a if isinstance(a, str) else repr(a) for a in arguments)
    if reference is None:
        return print(function, arguments, "none", 0, 1, sep="\t")
    near = float(reference)
    residual = 0 if near == 0 else (reference - mpf(near)) / mpf(ulp(near))
    print(function, arguments, nstr(reference, 25), nstr(residual, 3), nstr(max(mpf(1), conditioning), 3), sep="\t")


def ulp(x):
    return 2.0 ** (int(mp.floor(log(abs(mpf(x)), 2))) - 52)


def spread(low, high):
    """Even in the logarithm."""
    return low * (high / low) ** RNG.random()


def length():
    return spread(1.0, 200e3)


def radius():
    return RNG.choice((6371e3, RNG.uniform(6335e3, 6400e3)))


def coefficient():
    """Anywhere from -100 to 100: large, small, close to 1."""
    size = spread(1e-3, 100.0) * RNG.choice((-1, 1))
    return min(max(RNG.choice((size, 1 + size, RNG.uniform(-1, 2))), -100.0), 100.0)


# --- one sight ------------------------------------------------------------------------------------------------------


def height(s, k, r):
    """r - R of the ray that leaves horizontally in n ~ r^(-k), and its slope along s; none where it is upright."""
    q, theta = 1 - mpf(k), mpf(s) / mpf(r)
    if q == 0:
        return mpf(0), mpf(0)
    if abs(q) * theta >= pi / 2:
        return None
    grown = cos(q * theta) ** (-1 / q)
    return mpf(r) * (grown - 1), grown * tan(q * theta)


def steepening(s, value, slope):
    """How many times more than a parabola's the value's relative error grows out of that of s."""
    return abs(mpf(s) * slope / value) / 2 if value else 1


def curvature(s, r):
    emit("curvature", (s, r), height(s, 0, r)[0])


def steep(s, k, r):
    """Where the series gives way to the closed form (core/src/ray.rs)."""
    return "_steep" if max(1, abs(1 - mpf(k))) * mpf(s) / mpf(r) >= mpf("0.16") else ""


def combined(s, k, r):
    ray = height(s, k, r)
    emit("combined" + steep(s, k, r), (s, k, r), ray and ray[0], ray and steepening(s, *ray))


def refraction(s, k, r):
    level, ray = height(s, 0, r), height(s, k, r)
    value = ray and level[0] - ray[0]
    emit("refraction" + steep(s, k, r), (s, k, r), value, ray and steepening(s, value, level[1] - ray[1]))


def handbook(s, k, r):
    emit("handbook_combined", (s, k, r), (1 - mpf(k)) * mpf(s) ** 2 / (2 * mpf(r)))


def sights():
    for s in LENGTHS:
        for r in RADII:
            curvature(s, r)
        for k in COEFFICIENTS:
            combined(s, k, 6371e3)
            refraction(s, k, 6371e3)
            if s in (1.0, 30.0, 200e3):
                handbook(s, k, 6371e3)
    for k in (-100.0, 70.0):  # up to where the ray turns upright, |1 - k| s / R = pi / 2, and to both sides of 0.16
        turn = 6371e3 * float(pi) / 2 / abs(1 - k)
        for share in (0.1, 0.16, 0.5, 0.9, 0.99, 0.9999, 1 - 1e-9, 1.0001):
            combined(turn * share, k, 6371e3)
            refraction(turn * share, k, 6371e3)
    for arguments in HARDEST["curvature"]:
        curvature(*arguments)
    for arguments in HARDEST["ray"]:
        combined(*arguments)
        refraction(*arguments)
    for arguments in HARDEST["handbook"]:
        handbook(*arguments)
    for _ in range(COUNT):
        curvature(length(), radius())
        combined(length(), coefficient(), radius())
        refraction(length(), coefficient(), radius())
        handbook(length(), coefficient(), radius())


# --- the horizon ----------------------------------------------------------------------------------------------------

HEIGHTS = (0.01, 10.0, 10_000.0)


def horizon(h, k, r):
    """Dip and arc of the line that grazes the surface; none where there is no such line."""
    q = 1 - mpf(k)
    dip = acos((1 + mpf(h) / mpf(r)) ** -q) if q > 0 else None
    return None if dip is None or dip > q * pi else (dip, mpf(r) * dip / q)


def horizons(h, k, r):
    found = horizon(h, k, r)
    emit("dip", (h, k, r), found and found[0])
    emit("horizon", (h, k, r), found and found[1])
    side = mpf(r) + mpf(h)
    chord = found and sqrt(side**2 + mpf(r) ** 2 - 2 * side * mpf(r) * cos(found[1] / mpf(r)))
    emit("horizon_line", (h, k, r), chord)


def dip_short(h, s, k, r):
    q, theta, up = 1 - mpf(k), mpf(s) / mpf(r), log(1 + mpf(h) / mpf(r))
    if abs(q) * theta >= pi:
        return emit("dip_short", (h, s, k, r), None)
    if q == 0:
        return emit("dip_short", (h, s, k, r), atan(up / theta))
    # The eye's power of the radius and the shore's, as in the plane that makes all rays straight.
    eye, turn = (1 + mpf(h) / mpf(r)) ** q, q * theta
    rise = 1 - cos(turn) + (eye - 1)
    tangent = rise / sin(turn)
    # Above k = 1 the parts of the rise have two signs, and the sine falls off towards pi.
    emit("dip_short", (h, s, k, r), atan(tangent), max((1 - cos(turn) + abs(eye - 1)) / abs(rise), abs(turn / tan(turn))))


def hidden(h, s, k, r):
    found = horizon(h, k, r)
    if found is None or mpf(s) <= found[1]:
        return emit("hidden", (h, s, k, r), mpf(0))
    ray = height(mpf(s) - found[1], k, r)
    # What lies beyond the horizon is a difference: this many ulps are made by one of s, or of the horizon.
    function = "hidden" + steep(mpf(s) - found[1], k, r)
    emit(function, (h, s, k, r), ray and ray[0], ray and 2 * steepening(s, *ray))


def visible_range(h, target, k, r):
    legs = horizon(h, k, r), horizon(target, k, r)
    emit("visible_range", (h, target, k, r), legs[0] and legs[1] and legs[0][1] + legs[1][1])


def horizons_and_hidden():
    for h in HEIGHTS:
        for k in COEFFICIENTS:
            horizons(h, k, 6371e3)
            visible_range(h, 30.0, k, 6371e3)
            dip_short(h, 1000.0, k, 6371e3)
            hidden(h, 1e6, k, 6371e3)
    for arguments in HARDEST["horizon"]:
        horizons(*arguments)
    for arguments in HARDEST["dip_short"]:
        dip_short(*arguments)
    for arguments in HARDEST["hidden"]:
        hidden(*arguments)
    for arguments in HARDEST["visible_range"]:
        visible_range(*arguments)
    for _ in range(2 * COUNT):
        h, k, r = spread(0.01, 10_000.0), coefficient(), radius()
        horizons(h, k, r)
        visible_range(h, spread(0.01, 10_000.0), k, r)
        dip_short(h, spread(1.0, 1e6), k, r)
        hidden(h, spread(1.0, 1e6), k, r)
        found = horizon(h, k, r)
        if found:  # just beyond the horizon, and well beyond
            hidden(h, float(found[1] * (1 + mpf(spread(1e-9, 10)))), k, r)
            dip_short(h, float(found[1] * RNG.random()), k, r)


# --- how far, how unequal -------------------------------------------------------------------------------------------


def reach(allowed, reading, growth, collimation, k, r):
    a, u, g, c, k2, r2 = map(mpf, (allowed, reading, growth, collimation, k, r))
    left, b, quad = a * a - u * u, c * c + g * g, (k2 / (2 * r2)) ** 2
    if left < 0:
        value = None
    elif b == 0 and quad == 0:
        return  # nothing grows with distance: infinite, a property, not a row
    elif quad == 0:
        value = sqrt(left / b)
    else:
        value = sqrt((sqrt(b * b + 4 * quad * left) - b) / (2 * quad))
    emit("reach", (allowed, reading, growth, collimation, k, r), value)


def imbalance(allowed, mean, reading, growth, collimation, k, common, r):
    a, d, u, g, c, k2, rho, r2 = map(mpf, (allowed, mean, reading, growth, collimation, k, common, r))
    taken = 2 * u * u + 2 * (g * d) ** 2 + (1 - rho) * d**4 * k2**2 / (2 * r2**2)
    left, per = a * a - taken, c * c + g * g / 2 + (d * k2 / r2) ** 2
    if per == 0:
        return
    value = sqrt(left / per) if left >= 0 else None
    # What is allowed and what equal sights take of it cancel; half of the relative error, the root, is left.
    conditioning = (a * a + taken) / left / 2 if left > 0 else 1
    emit("imbalance", (allowed, mean, reading, growth, collimation, k, common, r), value, conditioning)


def maybe(low, high):
    return 0.0 if RNG.random() < 0.25 else spread(low, high)


def doubts():
    for allowed in (1e-4, 1.0):
        for reading in (0.0, allowed * 0.999999, allowed, allowed * 1.000001):
            reach(allowed, reading, 1e-5, 2e-5, 1.0, 6371e3)
        for only in ((1e-3, 0.0, 0.0), (0.0, 1e-3, 0.0), (0.0, 0.0, 100.0), (1e-3, 1e-3, 100.0), (1e-9, 0.0, 1e-6)):
            reach(allowed, 0.0, *only, 6371e3)
            for common in (0.0, 0.5, 1.0):
                imbalance(allowed, 30.0, 0.0, *only, common, 6371e3)
    for arguments in HARDEST["reach"]:
        reach(*arguments)
    for arguments in HARDEST["imbalance"]:
        imbalance(*arguments)
    for _ in range(2 * COUNT):
        growth, collimation, k = maybe(1e-7, 1e-3), maybe(1e-7, 1e-3), maybe(1e-3, 100.0)
        allowed = spread(1e-4, 1.0)
        reach(allowed, min(maybe(1e-6, 1.0) * allowed, 0.1), growth, collimation, k, radius())
        imbalance(
            allowed, spread(1.0, 1000.0), maybe(1e-6, 0.7) * allowed, growth / 10, collimation, k, RNG.random(), radius()
        )


# --- units ----------------------------------------------------------------------------------------------------------

RATIO = {"mm": mpf(1) / 1000, "cm": mpf(1) / 100, "km": mpf(1000), "ft": mpf("0.3048"), "ftUS": mpf(1200) / 3937}
RATIO |= {"mi": 5280 * mpf("0.3048"), "mm/m": mpf(1) / 1000, "ft/100 ft": mpf(1) / 100, "%": mpf(1) / 100}
ANGLE = {"″": pi / 648_000, "mgon": pi / 200_000, "°": pi / 180, "gon": pi / 200}
QUANTITY = {"mm": "Height", "cm": "SmallLength", "mm/m": "Collimation", "ft/100 ft": "Collimation", "%": "Gradient"}
QUANTITY |= {"″": "Collimation", "mgon": "Collimation", "°": "Gradient", "gon": "Gradient"}
LARGEST = {"″": 206.0, "mgon": 63.0, "°": 45.0, "gon": 50.0}  # 1 mm/m and 45 degrees


def units():
    def both(symbol, scale, number):
        quantity = QUANTITY.get(symbol, "Distance")
        emit("ratio_to_si", (quantity, symbol, number), mpf(number) * scale)
        emit("ratio_from_si", (quantity, symbol, number), mpf(number) / scale)

    def angle(symbol, number, si):
        # Near upright the tangent runs away; up to 45 degrees that is a factor of pi / 2 at most.
        x = mpf(number) * ANGLE[symbol]
        emit("angle_to_si", (QUANTITY[symbol], symbol, number), tan(x), 2 * x / sin(2 * x))
        emit("angle_from_si", (QUANTITY[symbol], symbol, si), atan(mpf(si)) / ANGLE[symbol])

    for symbol, scale in RATIO.items():
        for number in (0.1, 1 / 3, 984.0):
            both(symbol, scale, number)
    for symbol, scale in ANGLE.items():
        top = LARGEST[symbol]
        for number in (top, -top / 7, 0.1 * top / 45, top * 1e-6, *(spread(top / 1e4, top) for _ in range(COUNT // 4))):
            angle(symbol, number, float(tan(mpf(number) * scale)))
    for arguments in HARDEST["angle"]:
        angle(*arguments)
    for _ in range(COUNT // 4):
        for number in (89.0, 89.99, spread(45.0, 89.99)):
            angle("°", number, float(tan(mpf(number) * ANGLE["°"])))
    for number in (1.0001, 1.149, 7 / 6, 4 / 3, 0.5, -2.0, 1e3, *(spread(0.01, 100.0) for _ in range(COUNT // 2))):
        # 1 - 1/n cancels where the factor is close to 1.
        emit("factor_to_si", ("Refraction", "factor", number), 1 - 1 / mpf(number), 1 / abs(mpf(number) - 1))
        emit("inverse_to_si", ("Refraction", "1/", number), 1 / mpf(number))
    for k in (-100.0, -2.5, 0.13, 1 / 7, 0.999, 1.001, 100.0):
        emit("factor_from_si", ("Refraction", "factor", k), 1 / (1 - mpf(k)))


# --- the guide of k -------------------------------------------------------------------------------------------------


def guide():
    """The nodes are read where they stand, core/src/air/guide.rs; here only what lies between them is computed."""
    source = (pathlib.Path(__file__).parents[2] / "core/src/air/guide.rs").read_text()
    number = r"(-?\d+(?:\.\d+)?)"
    pairs = r"\[" + ", ".join([rf"\({number}, {number}\)"] * 3) + r"\]"
    rows = re.findall(rf"\({number}, {pairs}, \({number}, {number}, {number}\)\)", source)
    nodes = [[mpf(x) for x in row] for row in rows]
    assert len(nodes) == 8, nodes
    skies = {"Sunny": 1, "Overcast": 3, "Unknown": 5}
    heights = [0.1, 0.5, 1.8, 4.0, 17.3, 100.0, 400.0, *(h for (h,) in HARDEST["guide"])]
    heights += [spread(0.5, 100.0) for _ in range(COUNT // 10)]
    for h in heights:
        at = min(max(mpf(h), mpf(0.5)), mpf(100))
        upper = next(i for i, n in enumerate(nodes) if at <= mpf(float(n[0])))
        below, above = nodes[max(upper - 1, 0)], nodes[max(upper, 1)]
        # The heights of the nodes are what f64 makes of 17.3 and 54.8.
        low, high = mpf(float(below[0])), mpf(float(above[0]))
        share = log(at / low) / log(high / low)

        def mix(name, sky, *columns):
            """The sum of columns, a negative one subtracted, between the nodes."""
            ends = [[(1 if c > 0 else -1) * node[abs(c)] for c in columns] for node in (below, above)]
            parts = [(1 - share) * x for x in ends[0]] + [share * x for x in ends[1]]
            value, slope = sum(parts), (sum(ends[1]) - sum(ends[0])) / log(high / low)
            # Where k changes its sign, both what is added and what an ulp of the height does are large beside it.
            emit(name, (sky, h), value, max(sum(map(abs, parts)), abs(slope)) / abs(value))

        for sky, column in skies.items():
            mix("guide_value", sky, column)
            mix("guide_low", sky, column, -(column + 1))
            mix("guide_high", sky, column, column + 1)
        mix("guide_value", "ClearNight", 7)
        mix("guide_low", "ClearNight", 8)
        mix("guide_high", "ClearNight", 9)


print("# Made by tests/tables/make_rows.py, which says what the columns are. Not to be edited.")
sights()
doubts()
units()
guide()
horizons_and_hidden()  # last, so that its random rows do not change those above
