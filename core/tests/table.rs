//! Tables as people type, paste and strike them.
#![allow(clippy::unwrap_used, clippy::indexing_slicing, reason = "a test may panic")]

use farstaff::quantity::unit::Quantity;
use farstaff::question::field::Opt;
use farstaff::question::{Asked, Field, Question};

const FAR: Field =
    Field::number("far", "Distance", Quantity::Distance, "100").range(0.0, 1e6, "it is a distance").required();
const UP: Field =
    Field::number("up", "Ground height", Quantity::Height, "12.5").range(-500.0, 9000.0, "of the earth").required();
const KIND: Field = Field::choice(
    "cover",
    "Cover",
    &[Opt { value: "open", label: "open" }, Opt { value: "wood", label: "trees" }],
    "two kinds",
)
.default("open");
const WORDS: Field = Field::text("remark", "Remark", 12, "it must fit the sheet", "gate");
const COLUMNS: &[Field] = &[FAR, UP, KIND, WORDS];
const TABLE: Field =
    Field::table("profile", "Profile", COLUMNS, "point").rows(6, "so that the test is short").required();
const QUESTION: Question = Question {
    id: "test",
    phrase: "",
    about: "",
    fields: &[TABLE],
    results: &[],
    cautions: &[],
    sources: &[],
    answer: |_, _| {},
};

fn read(text: &str) -> Asked {
    read_with(&[("profile", text)])
}

fn read_with(pairs: &[(&str, &str)]) -> Asked {
    Asked::read(&QUESTION, &form_urlencoded::Serializer::new(String::new()).extend_pairs(pairs).finish())
}

fn heights(asked: &Asked) -> Vec<(f64, f64)> {
    asked.rows(&TABLE).iter().map(|r| (r.number(&FAR).unwrap(), r.number(&UP).unwrap())).collect()
}

const TWO: [(f64, f64); 2] = [(0.0, 12.5), (100.0, 13.0)];

#[test]
fn any_usual_separator_and_decimal_sign() {
    for text in [
        "0\t12.5\n100\t13",
        "0\t12,5\r\n100\t13\r\n",
        "0;12,5\n100;13,0;;\n",
        "0,12.5\n100,13.0",
        "0 12.5\n100   13",
        "\"0\";\"12,5\"\n\"100\";\"13\";\"wood\";\"a \"\"gate\"\"\"",
        "Distance;Ground height\n0;12,5\n100;13",
        "Ground height (m)\tDistance [m]\n12.5\t0\n13\t100\n",
        "up, far\n12.5, 0\n13, 100",
    ] {
        let asked = read(text);
        assert_eq!(asked.problems, vec![], "{text:?}");
        assert_eq!(heights(&asked), TWO, "{text:?}");
        // What was understood says the same again, and changes no more.
        let again = Asked::read(&QUESTION, &asked.entry);
        assert_eq!((heights(&again), &again.entry), (heights(&asked), &asked.entry), "{text:?}");
        assert!(again.text(&TABLE).contains('\t') && again.notes.is_empty(), "{text:?}");
    }
}

#[test]
fn units_by_cell_by_column_and_by_heading() {
    let feet = [(0.0, 3.048), (30.48, 6.096)];
    let close = |asked: &Asked| {
        heights(asked)
            .iter()
            .zip(feet)
            .for_each(|(a, b)| assert!((a.0 - b.0).abs() + (a.1 - b.1).abs() < 1e-12, "{a:?}"));
        assert!(asked.problems.is_empty() && asked.rows(&TABLE).len() == 2, "{:?}", asked.problems);
    };
    close(&read("0\t10 ft\n100 ft\t6096 mm"));
    close(&read_with(&[("profile", "0\t10\n100\t20"), ("profile.far.unit", "ft"), ("profile.up.unit", "ft")]));
    close(&read("Distance (ft);Ground height (ft)\n0;10\n100;20"));
}

#[test]
fn what_was_struck_stays_and_does_not_count() {
    let asked = read("0\t12.5\n~50\tnonsense\n\n100\t13\twood\tgate");
    assert!(asked.problems.is_empty());
    assert_eq!(heights(&asked), TWO);
    let last = &asked.rows(&TABLE)[1];
    assert_eq!((last.line, last.choice(&KIND), last.text(&WORDS)), (3, "wood", "gate"));
    assert_eq!(asked.rows(&TABLE)[0].choice(&KIND), "open");
    assert!(asked.text(&TABLE).contains("~50\tnonsense") && asked.read[0].echo == "2 points, 1 struck");
}

#[test]
fn what_is_wrong_is_named_at_its_cell() {
    let asked = read("0\t12.5\n\t13\n5\tabc\n6\t1\tlake\n7\t1\twood\tfar too many words here\n8\t1\t\t\t9");
    let cells: Vec<_> = asked.problems.iter().map(|p| p.cell.map(|c| (c.row, c.column))).collect();
    assert_eq!(cells, [Some((1, 0)), Some((2, 1)), Some((3, 2)), Some((4, 3)), Some((5, 0))]);
    assert_eq!(asked.problems[0].message, "Point 2: enter the distance.");
    assert!(asked.problems.iter().all(|p| p.message.starts_with("Point ")));
    // A fix says the unit with the number, as a cell has no list of units.
    let far = read("0\t1\n-3 km\t1\n1,234.5\t1");
    assert!(
        far.problems
            .iter()
            .flat_map(|p| &p.fixes)
            .any(|f| f.text == "1234.5 m" && f.cell.is_some() && f.unit.is_empty())
    );
}

#[test]
fn a_row_of_the_pages_own_ends_in_a_tab() {
    // The first cell while it is being filled: no comma, space or semicolon in it parts it.
    for cell in ["12,5", "100 m", "1;2"] {
        let asked = read(&format!("{cell}\t"));
        assert_eq!((asked.text(&TABLE), asked.notes.len()), (format!("{cell}\t").as_str(), 0));
    }
    // Words typed into the first row are named there and not taken for headings; a row left empty keeps its number.
    let asked = read("here\tthere\t\n0\t1\t");
    assert_eq!(asked.problems[0].cell.map(|c| (c.row, c.column)), Some((0, 0)));
    assert_eq!(read("\t\n5\tabc\t").problems[0].cell.map(|c| (c.row, c.column)), Some((1, 1)));
}

#[test]
fn nothing_and_too_much() {
    assert_eq!(read("").problems[0].message, "Enter the profile.");
    assert_eq!(read("\n\n").problems.len(), 1);
    assert!(read(&"0\t1\n".repeat(7)).problems[0].message.contains("6 rows at most"));
    // Words that name no column are a row like any other: nothing is left out unsaid.
    assert_eq!(read("station;level of it\n0;12,5").problems.len(), 2);
    let many = read(&"x\ty\n".repeat(60));
    assert!(many.problems.len() < 30 && many.problems.last().unwrap().message.contains("more cells"));
}
