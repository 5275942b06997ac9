//! Rows as people leave them: each slip is named at its row, in words.

use super::{book, column, value};

/// Rows, where the problem is (row and column, from 0), and words of it.
const SLIPS: &[(&str, (usize, usize), &str)] = &[
    ("A\t\t\t1.2", (0, 3), "Row 1: a fore sight, but no back sight before it."),
    ("A\t1.2\nB\t\t\t1.1\nC\t\t\t1.3", (2, 3), "Row 3: a fore sight, but no back sight before it."),
    ("A\t\t1.2", (0, 2), "Row 1: an intermediate sight, but no back sight before it."),
    ("A\t1.2\nB\t\t\t1.1\nP\t\t0.9", (2, 2), "Row 3: an intermediate sight, but no back sight before it."),
    ("A\t1.2\nB\t1.1", (1, 1), "Row 2: a second back sight, but no fore sight has ended the setup before."),
    ("A\t1.2\nB\t\t1.3\t1.1", (1, 2), "Row 2: an intermediate sight needs a row of its own."),
    ("A\t1.2\t1.3", (0, 2), "Row 1: an intermediate sight needs a row of its own."),
    (
        "A\t1.2\nB\t1.3\t\t1.1\t30\t31\t1.4",
        (1, 6),
        "Row 2: whose wires are these? Book fore and back sight in two rows.",
    ),
    ("A\t-1.2", (0, 1), "Row 1: back sight must be between 0 m and 20 m"),
    ("A\t1.2\nB\t\t\tabc", (1, 3), "Row 2: "),
    ("\n\nA\t1.2\n\n~B\t\t\t9\nB\t\t\t1.1\nC\t\t\t1", (6, 3), "Row 7: a fore sight"),
];

#[test]
fn slips_are_named_at_their_row() {
    for (rows, (row, at), words) in SLIPS {
        let answer = book(rows, &[]);
        let first = answer.problems.first().unwrap_or_else(|| panic!("{rows:?} is taken"));
        assert_eq!(first.cell.map(|c| (c.row, c.column)), Some((*row, *at)), "{rows:?}: {first:?}");
        assert!(first.message.replace('\u{a0}', " ").starts_with(words), "{rows:?}: {}", first.message);
        assert!(answer.results.is_empty() && !answer.verdict.sentence.is_empty());
    }
}

#[test]
fn what_is_legal_is_taken() {
    // An empty row, a row of words, one reading alone, a setup without its fore sight, a point in two rows or in one.
    for rows in [
        "A\t1.2",
        "A\t1.2\nP\t\t0.9",
        "A\t1.2\n\n\nB\t\t\t1.1",
        "A\t1.2\nlunch\nB\t\t\t1.1",
        "A\t1.2\nB\t\t\t1.1\nB\t1.3",
        "\t1.2\n\t1.3\t\t1.1\n\t\t\t1.0",
    ] {
        assert_eq!(book(rows, &[]).problems, vec![], "{rows:?}");
    }
    let [one, two] =
        ["A\t1.2\nB\t1.3\t\t1.1\nC\t\t\t1", "A\t1.2\nB\t\t\t1.1\nB\t1.3\nC\t\t\t1"].map(|rows| book(rows, &[]));
    assert_eq!(one.results, two.results);
    assert_eq!(column(&one, "Level by c"), column(&two, "Level by c"));
}

#[test]
fn any_text_in_any_column_is_answered_in_words() {
    let scraps = [
        "", "-", "1,2,3", "1.2 kg", "NaN", "1e999", "−0.5", "🦔", "\"", "9999", "12345", "yes", "~", "0", "25:99", ":",
    ];
    for at in 0..13 {
        for scrap in scraps {
            let mut cells = vec![""; 13];
            cells[0] = "B";
            cells[3] = "1.1";
            cells[at] = scrap;
            let answer = book(&format!("A\t1.2\t\t\t30\n{}\nC\t1.1", cells.join("\t")), &[("close", "1")]);
            assert!(!answer.verdict.word.is_empty() && !answer.verdict.sentence.is_empty(), "{at} {scrap}");
            assert!(answer.problems.iter().all(|p| !p.message.is_empty()), "{at} {scrap}");
        }
    }
}

#[test]
fn ten_thousand_rows() {
    let mut rows = "A\t1.234\t\t\t30\n".to_owned();
    for i in 0..10_000 {
        rows.push_str(&format!("C{i}\t1.{:03}\t\t1.{:03}\t30\t31\n", i % 1000, (i + 7) % 1000));
    }
    let answer = book(&rows, &[("start", "100")]);
    assert_eq!((answer.problems.len(), value(&answer, "setups")), (0, Some(10_000.0)));
    // A fore sight without a back sight, at the far end.
    let answer = book(&(rows + "B\t\t\t1.2\nB\t\t\t1.3"), &[]);
    assert_eq!(answer.problems[0].cell.map(|c| (c.row, c.column)), Some((10_002, 3)));
}

#[test]
fn pauses_and_moved_levels() {
    let rows = "A\t1.200\t\t\t30";
    let shift = |again: &str| {
        let answer = book(rows, &[("reread", again)]);
        let found = answer.results.iter().find(|r| r.name == "shift").unwrap().clone();
        (found.value.unwrap(), found.meaning.starts_with("not moved"))
    };
    // Two readings at 30 m: √2 · √(0.5² + 0.3²) = 0.82 mm, by hand.
    assert_eq!(shift("1.2008"), (0.0008, true));
    assert_eq!(shift("1.2009"), (0.0009, false));
    assert_eq!(shift("1.195"), (-0.005, false));
}

#[test]
fn nothing_is_spread_beyond_the_limit_without_a_reason() {
    let rows = "A\t1.200\nB\t\t\t1.100";
    let adjusted = |close: &str, reason: &str| {
        let answer = book(rows, &[("start", "10"), ("close", close), ("adjust", "setups"), ("reason", reason)]);
        let table = answer.tables.iter().find(|t| t.name == "levels").unwrap();
        // What was read stays as it was.
        assert_eq!(table.rows[1][7], "10.100");
        table.columns.iter().position(|c| c == "Adjusted").map(|at| table.rows[1][at].clone())
    };
    assert_eq!(adjusted("10.104", ""), Some("10.1040".to_owned()));
    assert_eq!(adjusted("10.106", ""), None);
    assert_eq!(adjusted("10.106", " "), None);
    assert_eq!(adjusted("10.106", "agreed"), Some("10.1060".to_owned()));
}

#[test]
fn a_known_level_in_the_first_or_last_row_counts() {
    // Known level is the twelfth column.
    let first = format!("A\t1.200{}10.5", "\t".repeat(10));
    let last = format!("B\t\t\t1.100{}10.6", "\t".repeat(8));
    let answer = book(&[first.as_str(), &last].join("\n"), &[]);
    assert_eq!((value(&answer, "last_level"), value(&answer, "misclosure")), (Some(10.6), Some(0.0)));
    let overruled = book(&[first.as_str(), "B\t\t\t1.100"].join("\n"), &[("start", "20")]);
    assert_eq!(value(&overruled, "last_level"), Some(20.1));
}
