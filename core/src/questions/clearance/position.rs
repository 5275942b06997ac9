//! How far A and B lie apart, and where along the line each point stands: as entered, by latitude and longitude, or on a
//! grid.

use super::{DISTANCE, SHORTEST};
use crate::earth::WGS84;
use crate::place::{Foot, Geodesic, GridLine, GridPoint, Position, ends_exchanged};
use crate::quantity::show::Round;
use crate::quantity::unit::Quantity;
use crate::quantity::{Angle, Metres};
use crate::question::answer::{Handed, Offer};
use crate::question::asked::Row;
use crate::question::field::{Field, Opt};
use crate::question::pencil::line;
use crate::question::{Answer, Asked, site};
use std::f64::consts::{FRAC_PI_2, PI};

pub const POSITIONS: Field = Field::choice(
    "positions",
    "How far apart",
    &[
        Opt { value: "given", label: "distance" },
        Opt { value: "latlon", label: "latitude, longitude" },
        Opt { value: "grid", label: "easting, northing" },
    ],
    "these are the ways to say it",
)
.help(
    "A distance off the map, or the two positions: then points may be entered by theirs too, or come from a GPX file.",
)
.default("given");
/// Values of [`POSITIONS`].
pub const GIVEN: &[&str] = &["given"];
const LATLON: &[&str] = &["latlon"];
const GRID: &[&str] = &["grid"];
const PLACED: &[&str] = &["latlon", "grid"];

const POLES: &str = "no place lies beyond the poles; or latitude and longitude have changed places";
const HALVES: &str = "longitudes are counted from Greenwich, east to 180° and west to −180°";
/// Farthest coordinate of any grid, zone numbers in front of it included.
const GRIDS: f64 = 1e8;

const fn latitude(name: &'static str, label: &'static str, example: &'static str) -> Field {
    Field::number(name, label, Quantity::Latitude, example)
        .range(-FRAC_PI_2, FRAC_PI_2, POLES)
        .when("positions", LATLON)
}
const fn longitude(name: &'static str, label: &'static str, example: &'static str) -> Field {
    Field::number(name, label, Quantity::Longitude, example).range(-PI, PI, HALVES).when("positions", LATLON)
}
const fn coordinate(name: &'static str, label: &'static str, example: &'static str) -> Field {
    let field = Field::number(name, label, Quantity::Coordinate, example);
    field.range(-GRIDS, GRIDS, "no grid of the earth goes farther").when("positions", GRID)
}

const DEGREES: &str = "Degrees, or degrees, minutes and seconds; N or S, or − for south. WGS84, as receivers have it.";
pub const LATITUDE_A: Field = latitude("latitude_a", "Latitude of A", "52.1234").help(DEGREES).required();
pub const LONGITUDE_A: Field =
    longitude("longitude_a", "Longitude of A", "5.4321").help("E or W, or − for west.").required();
pub const LATITUDE_B: Field = latitude("latitude_b", "Latitude of B", "52.1903").help("As that of A.").required();
pub const LONGITUDE_B: Field =
    longitude("longitude_b", "Longitude of B", "5.5608").help("E or W, or − for west.").required();
const ONE_GRID: &str = "All in one zone of one grid.";
pub const EASTING_A: Field = coordinate("easting_a", "Easting of A", "512 300").help(ONE_GRID).required();
pub const NORTHING_A: Field = coordinate("northing_a", "Northing of A", "5 763 400").help(ONE_GRID).required();
pub const EASTING_B: Field = coordinate("easting_b", "Easting of B", "521 800").help(ONE_GRID).required();
pub const NORTHING_B: Field = coordinate("northing_b", "Northing of B", "5 770 700").help(ONE_GRID).required();
pub const SCALE: Field = Field::number("scale", "Scale factor of the grid", Quantity::Factor, "0.9996")
    .range(0.99, 1.01, "no grid that is measured on is stretched by more")
    .help("Distances on the grid are divided by it: 0.9996 in the middle of a UTM zone, where leaving it at 1 makes the line 4 m in 10 km too short.")
    .default("1")
    .when("positions", GRID);

const BY_POSITION: &str = "Its position";
pub const LATITUDE: Field =
    latitude("latitude", "Latitude", "52.1512").help("Where the distance from A is left empty.").under(BY_POSITION);
pub const LONGITUDE: Field = longitude("longitude", "Longitude", "5.4854").help("Of the point.").under(BY_POSITION);
pub const EASTING: Field =
    coordinate("easting", "Easting", "517 100").help("Where the distance from A is left empty.").under(BY_POSITION);
pub const NORTHING: Field = coordinate("northing", "Northing", "5 767 000").help("Of the point.").under(BY_POSITION);

const POINTS: &str = "Points from a track";
pub const ASIDE: Field = Field::number("aside", "How far off the line", Quantity::Distance, "30 m")
    .range(0.0, 5000.0, "farther off it is other ground, and distances along the line are no longer exact")
    .help("Points farther to the side than this are named and left out: a path does not keep to the line.")
    .default("50 m")
    .under(POINTS)
    .when("positions", PLACED);
pub const HEIGHTS_FROM: Field = Field::choice(
    "heights",
    "Heights of the points",
    &[
        Opt { value: "map", label: "above the datum of the map" },
        Opt { value: "ellipsoid", label: "above the ellipsoid" },
        Opt { value: "unknown", label: "not known" },
    ],
    "these are the two a satellite receiver gives, and seldom says which",
)
.help("Those of A and B are above the map's. A track may have either.")
.default("map")
.under(POINTS);
pub const SEPARATION: Field = Field::number("separation", "Geoid over the ellipsoid there", Quantity::Height, "45 m")
    .range(-120.0, 100.0, "over the whole earth it lies between −107 m and 86 m")
    .help("Off a geoid model or the map's margin; − where the geoid lies below. It is taken off the heights of the points.")
    .required()
    .under(POINTS)
    .when("heights", &["ellipsoid"]);

/// The line from A to B over the surface of the earth.
pub struct Course {
    /// How long it is, along the level surface.
    pub s: f64,
    way: Way,
}

enum Way {
    Entered,
    Geodesic(Box<Geodesic>, [Position; 2]),
    Grid(GridLine, [GridPoint; 2]),
}

impl Course {
    /// `None` where the stations are too near or too far for any line: the answer then says so.
    pub fn of(asked: &Asked, answer: &mut Answer) -> Option<Course> {
        let of = |field: &Field| asked.must(field);
        let course = match asked.choice(&POSITIONS) {
            "latlon" => {
                let at =
                    |latitude, longitude| Position { latitude: Angle(of(latitude)), longitude: Angle(of(longitude)) };
                let ends = [at(&LATITUDE_A, &LONGITUDE_A), at(&LATITUDE_B, &LONGITUDE_B)];
                let line = Geodesic::between(ends[0], ends[1])?;
                Course { s: line.length.0, way: Way::Geodesic(Box::new(line), ends) }
            }
            "grid" => {
                let at = |easting, northing| GridPoint { easting: Metres(of(easting)), northing: Metres(of(northing)) };
                let ends = [at(&EASTING_A, &NORTHING_A), at(&EASTING_B, &NORTHING_B)];
                let line = GridLine::between(ends[0], ends[1], of(&SCALE));
                Course { s: line.length.0, way: Way::Grid(line, ends) }
            }
            _ => Course { s: of(&DISTANCE), way: Way::Entered },
        };
        if (SHORTEST..=site::FARTHEST).contains(&course.s) {
            return Some(course);
        }
        let show = asked.show();
        let mut why = format!(
            "A and B lie {} apart by their positions; it must be between {} and {}.",
            show.distance(course.s, Round::Near),
            show.distance(SHORTEST, Round::Near),
            show.distance(site::FARTHEST, Round::Near)
        );
        if let Way::Geodesic(_, [a, b]) = course.way {
            let ways = ends_exchanged(a, b, Metres(site::FARTHEST));
            if !ways.is_empty() {
                why.push_str(" Latitude and longitude may have changed places.");
            }
            answer.offers.extend(ways.into_iter().map(|way| exchange(asked, way)));
        }
        answer.not_known(why);
        None
    }

    /// R: as entered, else in the azimuth of the line where its position is known, else the mean one; and its source.
    pub fn radius(&self, asked: &Asked) -> (f64, &'static str) {
        match &self.way {
            _ if asked.given(&site::RADIUS) => (site::radius(asked).0.0, "as entered"),
            Way::Geodesic(line, _) => (line.radius(&WGS84).0, "of the ellipsoid WGS84 in the azimuth of the line"),
            _ => (site::radius(asked).0.0, "the mean radius of the earth"),
        }
    }

    /// Which way the line runs, and from which north.
    pub fn direction(&self) -> Option<(Angle, &'static str)> {
        match &self.way {
            Way::Entered => None,
            Way::Geodesic(line, _) => Some((line.azimuth, "from true north over east, at A")),
            Way::Grid(line, _) => Some((line.bearing, "from grid north over east")),
        }
    }

    /// Where a row that has no distance stands; `None` where it has no position either.
    pub fn foot(&self, row: &Row) -> Option<Foot> {
        match &self.way {
            Way::Entered => None,
            Way::Geodesic(line, _) => line.foot(position(row)?),
            Way::Grid(line, _) => {
                let (easting, northing) = (row.number(&EASTING)?, row.number(&NORTHING)?);
                Some(line.foot(GridPoint { easting: Metres(easting), northing: Metres(northing) }))
            }
        }
    }

    /// The other way round its latitude and longitude lie on the line.
    pub fn exchanged(&self, row: &Row, most: Metres) -> bool {
        match &self.way {
            Way::Geodesic(line, _) => position(row).is_some_and(|point| line.seems_exchanged(point, most)),
            _ => false,
        }
    }

    /// How the distance was come by, to be checked with a pencil.
    pub fn working(&self, lines: &mut Vec<String>) {
        match &self.way {
            Way::Entered => {}
            Way::Geodesic(geodesic, [a, b]) => {
                let degrees = |angle: Angle| angle.0 * 180.0 / PI;
                lines.push(line(
                    "A to B along the ellipsoid WGS84 (geodesic): {m} m, azimuth {m}° at A, {m}° at B",
                    &[self.s, degrees(geodesic.azimuth), degrees(geodesic.azimuth_at_end)],
                ));
                let middle = Angle((a.latitude.0 + b.latitude.0) / 2.0);
                let north = b.latitude.0 - a.latitude.0;
                let east = libm::remainder(b.longitude.0 - a.longitude.0, 2.0 * PI);
                let (m, n) = (WGS84.meridian(middle).0, WGS84.prime_vertical(middle).0 * libm::cos(middle.0));
                lines.push(line(
                    "nearly: north {m}° × π/180 × {m} m = {m} m, east {m}° × π/180 × {m} m = {m} m, root of the squares {m} m",
                    &[
                        degrees(Angle(north)),
                        m,
                        north * m,
                        degrees(Angle(east)),
                        n,
                        east * n,
                        libm::hypot(north * m, east * n),
                    ],
                ));
            }
            Way::Grid(_, [a, b]) => {
                let (east, north) = (b.easting.0 - a.easting.0, b.northing.0 - a.northing.0);
                let grid = libm::hypot(east, north);
                lines.push(line(
                    "A to B: √({m}² + {m}²) = {m} m on the grid, / {m} = {m} m",
                    &[east, north, grid, grid / self.s, self.s],
                ));
            }
        }
    }
}

/// Latitude and longitude of A, of B or of both exchanged with one tap.
fn exchange(asked: &Asked, (a, b): (bool, bool)) -> Offer {
    let handed = |to: &Field, from: &Field| Handed {
        field: to.name,
        text: asked.text(from).to_owned(),
        unit: asked.unit(from).map_or("", |unit| unit.symbol),
    };
    let pairs = [(a, [&LATITUDE_A, &LONGITUDE_A]), (b, [&LATITUDE_B, &LONGITUDE_B])];
    let taken = pairs.into_iter().filter(|(turn, _)| *turn).map(|(_, pair)| pair);
    let values = taken.flat_map(|[one, other]| [handed(one, other), handed(other, one)]).collect();
    let whose = match (a, b) {
        (true, true) => "Exchange those of both",
        (true, _) => "Exchange those of A",
        _ => "Exchange those of B",
    };
    Offer { label: whose.to_owned(), text: "Latitude and longitude change places.".to_owned(), values }
}

fn position(row: &Row) -> Option<Position> {
    Some(Position { latitude: Angle(row.number(&LATITUDE)?), longitude: Angle(row.number(&LONGITUDE)?) })
}

/// What the heights of the points count from, and what that does.
pub fn say_heights(asked: &Asked, answer: &mut Answer) {
    let by = asked.must(&SEPARATION);
    match asked.choice(&HEIGHTS_FROM) {
        "ellipsoid" => {
            let (way, size) = if by < 0.0 { ("raised", -by) } else { ("lowered", by) };
            let size = asked.show().height_words(size);
            answer.note(format!("The points were {way} by {size}: from the ellipsoid to the datum of A and B."));
        }
        "unknown" => answer.caution(
            "It is not known what the heights of the points count from. If it is the ellipsoid, all of them are wrong by the separation there, up to 100 m, and the clearance with them: compare one with the map.",
        ),
        _ => {}
    }
}
