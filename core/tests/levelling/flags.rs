//! What is said at a row while it can still be mended.

use super::book;

/// Everything said at rows: row, column, words.
fn said(rows: &str, more: &[(&str, &str)]) -> Vec<(usize, usize, String)> {
    let answer = book(rows, more);
    let rows = answer.booked[0].rows.iter();
    rows.flat_map(|r| r.cautions.iter().map(|c| (r.row, c.column, c.text.replace('\u{a0}', " ")))).collect()
}

/// The one thing said begins so, at that row and column.
#[track_caller]
fn only(rows: &str, more: &[(&str, &str)], at: (usize, usize), words: &str) {
    let said = said(rows, more);
    assert!(said.len() == 1 && (said[0].0, said[0].1) == at && said[0].2.starts_with(words), "{said:?}");
}

#[test]
fn a_sound_book_is_left_alone() {
    let rows = "A\t1.234\t\t\t30\nP\t\t1.871\t\t25\nC1\t1.406\t\t0.987\t32\t28\nB\t\t\t1.562\t29";
    assert_eq!(said(rows, &[("staff_length", "4"), ("section", "2"), ("ground_slope", "2 %")]), vec![]);
}

#[test]
fn readings() {
    only("A\t1.234\nP\t\t0.212", &[], (1, 2), "Near the foot of the staff, below 0.3 m");
    only("A\t1.234\nP\t\t0.212", &[("lowest", "0.215")], (1, 2), "Near the foot");
    assert_eq!(said("A\t1.234\nP\t\t0.212", &[("lowest", "0.2")]), vec![]);
    only("A\t1.234\nP\t\t4.1", &[("staff_length", "4")], (1, 2), "Over the top of the staff of 4 m.");
    only("A\t1.234\nP\t\t2.1\nQ\t\t2.2", &[("section", "1.4")], (1, 2), "Over the first section, 1.4 m");
    only("A\t1.234\nP\t\t1.234", &[], (1, 2), "The same reading as the one before");
    for swapped in ["1.243", "1.324", "2.134"] {
        only(&format!("A\t1.234\nP\t\t{swapped}"), &[], (1, 2), "Like the reading before with two digits swapped");
    }
    for other in ["1.432", "1.235", "4.231", "1.253"] {
        assert_eq!(said(&format!("A\t1.234\nP\t\t{other}"), &[]), vec![], "{other}");
    }
    only("A\t4.56\nP\t\t4.65", &[("units", "foot")], (1, 2), "Like the reading before");
}

#[test]
fn distances() {
    only("A\t1.234\t\t\t61", &[], (0, 4), "Longer than 60 m.");
    only(
        "A\t1.234\t\t\t40\nC\t1.1\t\t1.5\t40\t70\nB\t\t\t1.62\t65",
        &[("sight_limit", "66")],
        (1, 5),
        "Longer than 66 m.",
    );
    only("A\t1.234\t\t\t40\nB\t\t\t1.5\t29", &[], (1, 4), "Unequal sights: the back sight is 11 m longer.");
    only("A\t1.234\t\t\t40\nB\t\t\t1.5", &[], (1, 4), "The fore sight of this setup has no distance");
    // (1.5 − 0.3) m / 10 % = 12 m uphill, (4 − 1.5) m / 10 % = 25 m downhill, by hand.
    let slope = [("ground_slope", "10 %"), ("staff_length", "4"), ("line_height", "1.5")];
    only("A\t1.234\t\t\t24\nB\t\t\t1.5\t14", &slope, (1, 4), "On this slope a sight that way reaches 12.0 m at most.");
    let down = [("ground_slope", "-10 %"), ("staff_length", "4"), ("line_height", "1.5")];
    only("A\t1.234\t\t\t14\nB\t\t\t1.5\t24", &down, (0, 4), "On this slope a sight that way reaches 12.0 m at most.");
}

#[test]
fn wires() {
    only("A\t1.200\t\t\t40\t\t1.300\t1.100", &[], (0, 4), "By the wires it is 20 m");
    only("A\t1.200\t\t\t\t\t1.300\t1.104", &[], (0, 6), "The half intervals differ by 4 mm");
    assert_eq!(said("A\t1.200\t\t\t\t\t1.300\t1.103", &[]), vec![]);
    only("A\t1.200\t\t\t\t\t1.300\t1.250", &[], (0, 6), "The middle wire does not lie between");
}

#[test]
fn points_rows_and_times() {
    only("A\t1.234\nB\t\t\t1.5\nC\t1.7", &[], (2, 0), "The fore sight before went to B.");
    only("A\t1.234\nP\t\t1.5\nQ\t\t1.6\np\t\t1.72", &[], (3, 0), "So is row 2 named");
    only("A\t1.234\nP\nB\t\t\t1.5", &[], (1, 1), "No reading in this row.");
    assert_eq!(said("A\t1.234\nB", &[]), vec![], "the last row is being begun");
    let at = |one: &str, other: &str| {
        let tabs = "\t".repeat(10);
        format!("A\t1.234{}{one}\nP\t\t1.5{}{other}", &tabs[..9], &tabs[..8])
    };
    only(&at("2026-12-01 14:05", "14:16"), &[], (1, 10), "11 minutes after the row before");
    only(&at("23:55", "2026-12-02 00:06"), &[], (1, 10), "11 minutes after");
    for (one, other) in [("14:05", "14:15"), ("14:05", ""), ("noon", "14:05"), ("24:05", "14:05"), ("1:0", "14:05")] {
        assert_eq!(said(&at(one, other), &[]), vec![], "{one} {other}");
    }
}

#[test]
fn headings_and_what_comes_next() {
    let rows = "A\t1.234\t\t\t32\nC 1\t1.406\t\t0.987\t30\t28\nP 4\t\t1.1\t\t20\nC 2\t\t\t1.562\t29";
    let booked = book(rows, &[("collimation", "0.1 mm/m"), ("k", "1 k")]).booked[0].clone();
    let heads: Vec<String> = booked.rows.iter().map(|r| r.head.replace('\u{a0}', " ")).collect();
    assert_eq!(heads, ["Setup 1", "Setup 2 · balance +2 m, +0.20 mm"]);
    // After the fore sight on C 2 its back sight; no other reading can come.
    assert_eq!((booked.begin, booked.names.len()), (1, 1));
    assert_eq!((booked.names[0].column, booked.names[0].text.as_str()), (1, "C 2"));
    let first_three: Vec<&str> = rows.lines().take(3).collect();
    let booked = book(&first_three.join("\n"), &[]).booked[0].clone();
    let names: Vec<(usize, &str)> = booked.names.iter().map(|n| (n.column, n.text.as_str())).collect();
    assert_eq!((booked.begin, names), (2, vec![(2, "P 5"), (3, "C 2")]));
}
