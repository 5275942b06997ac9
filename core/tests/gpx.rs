//! GPX as people export it, as it gets damaged, and as someone might send it who means harm.
#![allow(clippy::unwrap_used, clippy::indexing_slicing, reason = "a test may panic")]

use farstaff::quantity::unit::Quantity;
use farstaff::question::asked::gpx;
use farstaff::question::{Asked, Field, Question};

const fn degrees(name: &'static str, label: &'static str) -> Field {
    Field::number(name, label, Quantity::Distance, "52.1").range(-180.0, 180.0, "of the circle").required()
}
const LATITUDE: Field = degrees("latitude", "Latitude");
const LONGITUDE: Field = degrees("longitude", "Longitude");
const GROUND: Field =
    Field::number("ground", "Ground height", Quantity::Height, "12.5").range(-500.0, 9000.0, "of the earth").required();
const NAME: Field = Field::text("name", "Name", 12, "it must fit the sheet", "gate");
const COVER: Field = Field::number("cover", "Cover", Quantity::Height, "12").range(0.0, 100.0, "trees");
/// In another order than a file has them, and one that no file has.
const COLUMNS: &[Field] = &[NAME, LATITUDE, COVER, LONGITUDE, GROUND];
const TABLE: Field = Field::table("profile", "Profile", COLUMNS, "point")
    .rows(5, "so that the test is short")
    .required()
    .file(gpx::reader);
const BOOK: Field =
    Field::table("book", "Book", &[GROUND, COVER], "row").rows(5, "so that the test is short").file(gpx::reader);

const fn question(fields: &'static [Field]) -> Question {
    let (id, phrase, about, results, cautions, sources) = ("test", "", "", &[], &[], &[]);
    Question { id, phrase, about, fields, results, cautions, sources, answer: |_, _| {} }
}
const PLACES: Question = question(&[TABLE]);
const NO_PLACES: Question = question(&[BOOK]);

fn read_with(pairs: &[(&str, &str)]) -> Asked {
    Asked::read(&PLACES, &form_urlencoded::Serializer::new(String::new()).extend_pairs(pairs).finish())
}

fn read(text: &str) -> Asked {
    read_with(&[("profile", text)])
}

fn points(asked: &Asked) -> Vec<(f64, f64, f64, &str)> {
    let row = |row: &farstaff::question::asked::Row| {
        [LATITUDE, LONGITUDE, GROUND].map(|c| row.number(&c).unwrap_or(f64::NAN))
    };
    asked.rows(&TABLE).iter().map(|r| (row(r)[0], row(r)[1], row(r)[2], r.text(&NAME))).collect()
}

const TRACK: &str = r#"<?xml version="1.0" encoding="UTF-8"?>
<gpx version="1.1" creator="invented" xmlns="http://www.topografix.com/GPX/1/1" xmlns:x="urn:x">
  <metadata><name>Not a point</name><bounds minlat="1" minlon="2"/></metadata>
  <!-- <trkpt lat="9" lon="9"/> -->
  <trk><name>Ridge &amp; ford</name>
    <trkseg>
      <trkpt lat="52.1" lon="5.25"><ele>12.5</ele><time>2026-05-01T08:00:00Z</time><name>gate</name></trkpt>
      <trkpt lon='5.26' lat='52.11'>
        <ele> 13.25 </ele><name><![CDATA[A<B]]></name>
        <extensions><x:p><x:ele>99</x:ele></x:p><ele>98</ele><trkpt lat="1" lon="1"/></extensions>
      </trkpt>
    </trkseg>
  </trk>
</gpx>
"#;
const HEIGHTS: &str =
    "GPX does not say whether its heights are above the ellipsoid or above sea level, up to 100 m apart: find out.";

fn notes(asked: &Asked) -> Vec<&str> {
    asked.notes.iter().map(|n| n.text.as_str()).collect()
}

#[test]
fn a_track() {
    let asked = read(TRACK);
    assert_eq!(asked.problems, vec![]);
    assert_eq!(points(&asked), [(52.1, 5.25, 12.5, "gate"), (52.11, 5.26, 13.25, "A<B")]);
    assert_eq!(notes(&asked), ["Read as GPX: 2 track points.", HEIGHTS]);
    // From then on it is a table like any other.
    let again = Asked::read(&PLACES, &asked.entry);
    assert_eq!((points(&again), &again.entry), (points(&asked), &asked.entry));
    assert!(again.notes.is_empty() && again.text(&TABLE).starts_with("gate\t52.1\t\t5.25\t12.5\t\n"));
}

#[test]
fn heights_are_metres_whatever_the_column_has() {
    for pairs in [[("profile", TRACK), ("profile.ground.unit", "ft")], [("profile", TRACK), ("units", "foot")]] {
        assert_eq!(points(&read_with(&pairs))[0].2, 12.5);
    }
}

#[test]
fn routes_waypoints_parts_and_prefixes() {
    let gpx = |inner: &str| read(&format!("\u{feff} \n<g:gpx>{inner}</g:gpx>\n<!-- end -->"));
    let point = |mark: &str, n: i32| format!("<{mark} lat=\"{n}\" lon = \"1\" ><ele>{n}</ele></{mark} >");
    let part = |mark: &str, inner: &str, n: i32| format!("<{mark}>{}</{mark}>", point(inner, n));
    let latitudes = |asked: &Asked| points(asked).iter().map(|p| p.0).collect::<Vec<_>>();

    let track = gpx(&format!(
        "<trk>{0}{1}</trk><trk><trkseg/>{0}</trk>",
        part("trkseg", "trkpt", 1),
        part("g:trkseg", "g:trkpt", 2)
    ));
    assert_eq!(latitudes(&track), [1.0, 2.0, 1.0]);
    assert_eq!(
        notes(&track)[..2],
        ["Read as GPX: 3 track points.", "It is in 3 parts, which were joined in their order."]
    );

    let route = gpx(&format!("{}{}{}", point("wpt", 7), part("rte", "rtept", 3), part("rte", "rtept", 4)));
    assert_eq!(latitudes(&route), [3.0, 4.0]);
    assert!(notes(&route).contains(&"Other points of the file were left out."));

    let marks = gpx("<wpt lat=\"5\" lon=\"1\"/><wpt lat=\"6\" lon=\"1\"><ele>2</ele></wpt>");
    assert_eq!(latitudes(&marks), [5.0, 6.0]);
    assert_eq!(notes(&marks), ["Read as GPX: 2 single points.", HEIGHTS]);
    // What a point lacks is asked for in its row.
    assert_eq!(marks.problems[0].message, "Point 1: enter the ground height.");
    assert_eq!(marks.problems[0].cell.map(|c| (c.row, c.column)), Some((0, 4)));
}

#[test]
fn what_is_no_number_is_named_at_its_row() {
    let asked = read(
        "<gpx><wpt lat=\"NaN\" lon=\"1\"><ele>1</ele></wpt><wpt lat=\"91e999\" lon=\"\"><ele>&lt;b&gt;</ele></wpt></gpx>",
    );
    let cells: Vec<_> = asked.problems.iter().map(|p| p.cell.map(|c| (c.row, c.column))).collect();
    assert_eq!(cells, [Some((0, 1)), Some((1, 1)), Some((1, 3)), Some((1, 4))]);
    assert!(asked.text(&TABLE).contains("NaN"), "{}", asked.text(&TABLE));
}

#[test]
fn names_stay_in_their_cell() {
    let asked = read(
        "<gpx><wpt lat=\"1\" lon=\"1\"><ele>1</ele><name>~a&#9;b&#x0a;c &eacute; &amp; far too long</name></wpt></gpx>",
    );
    assert_eq!(asked.problems, vec![]);
    assert_eq!(points(&asked), [(1.0, 1.0, 1.0, "a b c &eacu")]);
}

#[test]
fn what_is_no_gpx_is_refused_in_words() {
    let bomb = format!(
        "<?xml version=\"1.0\"?><!DOCTYPE gpx [<!ENTITY a \"{}\">{}]><gpx><wpt lat=\"&h;\" lon=\"1\"/></gpx>",
        "ha".repeat(100),
        (0..8)
            .map(|n| format!(
                "<!ENTITY {} \"{}\">",
                (b'b' + n) as char,
                format!("&{};", (b'a' + n) as char).repeat(100)
            ))
            .collect::<String>()
    );
    let deep = format!("<gpx>{}", "<a>".repeat(300_000));
    let wide: String = TRACK.chars().flat_map(|c| [c, '\0']).collect();
    let cut = &TRACK[..TRACK.find("</gpx>").unwrap()];
    for (text, says) in [
        (bomb.as_str(), "declares entities"),
        (&deep, "its end is missing"),
        (&wide, "outermost mark is not gpx"),
        (&format!("\u{fffd}\u{fffd}{wide}"), "outermost mark is not gpx"),
        (cut, "its end is missing (2 points before that)"),
        (&TRACK[..TRACK.len() - 3], "broken or has no end"),
        ("<html><body lat=\"1\"></body></html>", "outermost mark is not gpx"),
        ("<gpx><wpt lat=\"1\" lon=\"2\"></gpx>", "close that are not open"),
        ("<gpx></gpx></gpx>", "close that are not open"),
        ("<gpx><wpt lat=\"1\" lon=\"2\"", "broken or has no end"),
        ("<gpx><wpt lat=\"1 lon=2></wpt></gpx>", "broken or has no end"),
        ("<gpx><!-- ", "broken or has no end"),
        ("<gpx></gpx>", "holds no points"),
        (
            &format!("<gpx>{}</gpx>", "<wpt lat=\"1\" lon=\"2\"/>".repeat(100_000)),
            "100000 single points, and 5 are the most",
        ),
    ] {
        let asked = read(text);
        assert_eq!(asked.problems.len(), 1, "{says}: {:?}", asked.problems.iter().take(3).collect::<Vec<_>>());
        assert!(asked.problems[0].message.contains(says), "{says}: {}", asked.problems[0].message);
        assert!(asked.rows(&TABLE).is_empty());
        // What was entered is not lost.
        assert!(asked.text(&TABLE) == text);
    }
    let entry = form_urlencoded::Serializer::new(String::new()).append_pair("book", TRACK).finish();
    let book = Asked::read(&NO_PLACES, &entry);
    assert!(book.problems[0].message.contains("these rows have none"));
}

#[test]
fn what_only_begins_like_a_file_is_a_table() {
    for text in ["<5\t1", "< 5", "<", "<<gpx>"] {
        assert!(!read(text).problems.iter().any(|p| p.message.contains("GPX")), "{text}");
    }
}

/// A stream of numbers, the same on every machine (Marsaglia's xorshift).
struct Dice(u64);

impl Dice {
    fn roll(&mut self, sides: usize) -> usize {
        self.0 ^= self.0 << 13;
        self.0 ^= self.0 >> 7;
        self.0 ^= self.0 << 17;
        usize::try_from(self.0 >> 32).unwrap() % sides
    }
}

/// Pieces that a scanner may stumble over.
const PIECES: [&str; 24] = [
    "<",
    ">",
    "/>",
    "</",
    "\"",
    "'",
    "=",
    "&",
    "&#x10FFFF;",
    "&#xD800;",
    "&#99999999999;",
    "<!--",
    "-->",
    "<![CDATA[",
    "]]>",
    "<?",
    "<!DOCTYPE",
    "</trkpt>",
    "<trkpt lat=\"1\" lon=\"2\">",
    "<ele>",
    "</gpx>",
    "\t~\n",
    "é",
    "\u{0}",
];

#[test]
fn damaged_files_are_read_or_refused() {
    let small = "<gpx><trk><trkseg><trkpt lat='1' lon='2'><ele>3</ele><name>&lt;a</name></trkpt></trkseg></trk></gpx>";
    let mut dice = Dice(20_261_201);
    let (mut whole, mut refused) = (0, 0);
    for case in 0..100_000 {
        let mut bytes = if case % 16 == 0 { TRACK } else { small }.as_bytes().to_vec();
        for _ in 0..=dice.roll(3) {
            let (at, to) = (dice.roll(bytes.len() + 1), dice.roll(bytes.len() + 1));
            let (at, to) = (at.min(to), at.max(to));
            match dice.roll(12) {
                0 => bytes.truncate(to),
                1 | 2 => drop(bytes.drain(at..(at + 12).min(to))),
                3..=6 => bytes.splice(at..at, PIECES[dice.roll(PIECES.len())].bytes()).for_each(drop),
                7 => bytes.extend_from_within(at..to),
                _ if at < bytes.len() => bytes[at] = u8::try_from(dice.roll(256)).unwrap(),
                _ => {}
            }
        }
        let text = String::from_utf8_lossy(&bytes);
        match gpx::read(&text, COLUMNS, 5) {
            Ok(rows) => {
                whole += 1;
                let odd = |line: &str| line.starts_with('~') || line.chars().any(|c| c.is_control() && c != '\t');
                assert!(!rows.text.lines().any(odd), "{text:?}");
                let mut lines = rows.text.lines();
                assert_eq!(lines.next(), Some("latitude (°)\tlongitude (°)\tground (m)\tname"));
                let rows = lines.inspect(|l| assert_eq!(l.matches('\t').count(), 3, "{l:?} of {text:?}")).count();
                assert!((1..=5).contains(&rows), "{text:?}");
            }
            Err(message) => {
                refused += 1;
                assert!(message.len() < 200 && message.ends_with('.'), "{message} of {text:?}");
            }
        }
        if case % 50 == 0 {
            let asked = read(&text);
            let full = asked.rows(&TABLE).iter().all(|r| r.number(&GROUND).is_some());
            assert!(!asked.problems.is_empty() || full, "{text:?}");
        }
    }
    println!("{whole} read, {refused} refused");
    assert!(whole > 10_000 && refused > 10_000, "{whole} read, {refused} refused");
}

#[test]
fn megabytes_are_walked_once() {
    // Each would take minutes if any part of it were walked again for each of its marks.
    let many = 100_000;
    for (open, piece, close) in [
        ("<gpx>", "<a>", ""),
        ("<gpx><wpt lat='1' lon='1'><name>", "&", "</name></wpt></gpx>"),
        ("<gpx><wpt lat='1' lon='1'>", "<name>&amp</name>", "</wpt></gpx>"),
        ("<gpx><wpt lat='1' lon='1'><name>", "<![CDATA[a]]>", "</name></wpt></gpx>"),
        ("<gpx><wpt ", "a='' ", "/></gpx>"),
        ("<gpx>", "<!-- -->", ""),
        ("<gpx>", "<?", ""),
        ("<gpx>", "<wpt lat='1' lon='1'/>", "</gpx>"),
    ] {
        let text = format!("{open}{}{close}", piece.repeat(many));
        match gpx::read(&text, COLUMNS, 5) {
            Ok(rows) => assert!(rows.text.len() < 200, "{piece}"),
            Err(message) => assert!(message.len() < 200, "{piece}"),
        }
    }
}
