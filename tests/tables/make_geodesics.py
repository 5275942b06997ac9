"""Rows of core/tests/rows/geodesics.tsv: geodesics and feet of perpendiculars by a general geodesic library.

    python3 tests/tables/make_geodesics.py > core/tests/rows/geodesics.tsv     # Needs geographiclib 2; the rows are committed.

WGS84, angles in degrees, lengths in metres, one line each:
    line  lat A  lon A  lat B  lon B  length  azimuth at A  azimuth at B  reduced length
    foot  lat A  lon A  lat B  lon B  lat P  lon P  along  offset
The reduced length says how far B moves to the side for a small turn at A, and so how well the azimuths are determined.
A foot is made backwards: from A the way `along`, a right angle to the right, the way `offset`; so it is exact to the
library's 15 nm, whatever way of finding it is tested. Positions are rounded to the f64 that the text reads as.
"""
import random
from importlib.metadata import version

from geographiclib.geodesic import Geodesic

EARTH = Geodesic.WGS84
RNG = random.Random(20261201)


def line(lat_a, lon_a, lat_b, lon_b):
    g = EARTH.Inverse(lat_a, lon_a, lat_b, lon_b, Geodesic.STANDARD | Geodesic.REDUCEDLENGTH)
    numbers = f"{g['s12']:.9f}", f"{g['azi1'] % 360:.14f}", f"{g['azi2'] % 360:.14f}", f"{g['m12']:.3f}"
    print("line", repr(lat_a), repr(lon_a), repr(lat_b), repr(lon_b), *numbers, sep="\t")


def move(lat, lon, azimuth, way):
    g = EARTH.Direct(lat, lon, azimuth, way)
    return g["lat2"], g["lon2"], g["azi2"]


def foot(lat, lon, azimuth, length, along, offset):
    lat_b, lon_b, _ = move(lat, lon, azimuth, length)
    azimuth = EARTH.Inverse(lat, lon, lat_b, lon_b)["azi1"]
    lat_x, lon_x, there = move(lat, lon, azimuth, along)
    lat_p, lon_p, _ = move(lat_x, lon_x, there + 90, offset)
    print("foot", *map(repr, (lat, lon, lat_b, lon_b, lat_p, lon_p)), f"{along:.6f}", f"{offset:.6f}", sep="\t")


print(f"# Made by tests/tables/make_geodesics.py with geographiclib {version('geographiclib')}; it says what the columns are.")

# Equator, meridian, over a pole, from a pole, over the antimeridian, antipodal and nearly so, the same point, turned about.
for row in [
    (0.0, 0.0, 0.0, 1.0), (0.0, 179.5, 0.0, -179.5), (0.0, 0.0, 0.0, 179.0), (0.0, 0.0, 0.0, 180.0),
    (0.0, 10.0, 1.0, 10.0), (-1.0, 10.0, 1.0, 10.0), (44.5, -3.0, 45.5, -3.0), (45.5, -3.0, 44.5, -3.0),
    (89.5, 0.0, 89.5, 180.0), (-89.5, 20.0, -89.9, -160.0), (90.0, 0.0, 89.0, 45.0), (90.0, 30.0, -90.0, 30.0),
    (89.0, 45.0, 90.0, 0.0), (-90.0, 0.0, -89.0, -120.0), (52.0, 179.9, 52.1, -179.9), (52.0, -179.9, 52.1, 179.9),
    (52.0, 359.0, 52.0, 1.0), (30.0, 0.0, -30.0, 179.9), (30.0, 0.0, -30.0, 179.5), (30.0, 0.0, -30.0, 180.0),
    (51.4, 6.2, 51.400009, 6.2), (51.4, 6.2, 51.4, 6.200014), (51.4, 6.2, 51.4, 6.2),
    (51.4, 6.2, 51.4 + 1e-10, 6.2), (-37.0, 144.0, -38.0, 143.0),
]:  # fmt: skip
    line(*row)
for length in (1.0, 100.0, 3000.0, 50_000.0, 200_000.0, 2_000_000.0):
    for _ in range(10):
        lat, lon = RNG.uniform(-89, 89), RNG.uniform(-180, 180)
        line(lat, lon, *move(lat, lon, RNG.uniform(0, 360), length)[:2])

for lat in (0.0, 0.5, -35.0, 45.0, 60.0, -89.5, 90.0):
    for azimuth in (0.0, 45.0, 90.0, 200.0):
        for length, along, offset in (
            (200_000.0, 100_000.0, 5000.0), (200_000.0, 200_000.0, -5000.0), (200_000.0, 0.0, 5000.0),
            (200_000.0, -4000.0, -20.0), (200_000.0, 204_000.0, 3.0), (20_000.0, 12_345.0, 1.0), (300.0, 100.0, -0.1),
        ):  # fmt: skip
            foot(lat, 179.9, azimuth, length, along, offset)
for _ in range(200):
    length = RNG.choice((1000.0, 10_000.0, 50_000.0, 200_000.0))
    lat, lon, azimuth = RNG.uniform(-90, 90), RNG.uniform(-180, 180), RNG.uniform(0, 360)
    foot(lat, lon, azimuth, length, RNG.uniform(-0.02, 1.02) * length, RNG.uniform(-5000, 5000))
