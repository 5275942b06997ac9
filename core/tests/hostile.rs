//! Files that mean harm, brought in through the question's own field: words come back, what was given is kept, and memory
//! stays a few times what was given. One test to a process, as it measures the process.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test may panic")]

use farstaff::question::ask;
use std::time::Instant;

const MEGABYTE: usize = 1_000_000;
/// Copies of the text that an answer may need at once: the form's, the field's, that of the entry with every sign coded
/// (three letters for one), and those handed out.
const COPIES: usize = 20;
/// What a row holds as it was read, and what is said of it; there are a million rows at most.
const ROW: usize = 700;

/// Most memory since it was last asked to forget, bytes; only where the system says.
fn peak() -> Option<usize> {
    let status = std::fs::read_to_string("/proc/self/status").ok()?;
    let line = status.lines().find(|line| line.starts_with("VmHWM"))?;
    Some(line.split_whitespace().nth(1)?.parse::<usize>().ok()? * 1024)
}

fn entity_bomb() -> String {
    let level =
        |n: u8| format!("<!ENTITY {} \"{}\">", char::from(b'b' + n), format!("&{};", char::from(b'a' + n)).repeat(100));
    let levels: String = (0..8).map(level).collect();
    format!("<?xml version=\"1.0\"?><!DOCTYPE gpx [<!ENTITY a \"ha\">{levels}]><gpx><wpt lat=\"&i;\" lon=\"1\"/></gpx>")
}

fn point(inside: &str) -> String {
    format!("<gpx><trk><trkseg><trkpt lat=\"52.15\" lon=\"5.48\">{inside}</trkpt></trkseg></trk></gpx>")
}

#[test]
fn megabytes_bombs_and_depth() {
    let many = |piece: &str| piece.repeat(2 * MEGABYTE / piece.len());
    for (what, text, says) in [
        ("an entity bomb", entity_bomb(), "declares entities of its own"),
        ("marks without end", format!("<gpx>{}", many("<a>")), "its end is missing"),
        ("a mark without end", format!("<gpx><wpt {}", many("a='b' ")), "broken or has no end"),
        ("closed too often", format!("<gpx></gpx>{}", many("</a>")), "marks close that are not open"),
        ("a name of megabytes", point(&format!("<ele>90</ele><name>{}</name>", many("&amp;"))), ""),
        ("a height of megabytes", point(&format!("<ele>{}</ele>", many("9"))), "ground height must be between"),
        ("a comment of megabytes", point(&format!("<!--{}--><ele>90</ele>", many("- -"))), ""),
        ("points of no use", format!("<gpx>{}</gpx>", many("<wpt lat=\"1\" lon=\"2\"/>")), "more cells need a look"),
    ] {
        let pairs = [
            ("ground_a", "120"),
            ("ground_b", "140"),
            ("positions", "latlon"),
            ("latitude_a", "52.1234"),
            ("longitude_a", "5.4321"),
            ("latitude_b", "52.1903"),
            ("longitude_b", "5.5608"),
            ("aside", "5 km"),
            ("profile", text.as_str()),
        ];
        let entry = form_urlencoded::Serializer::new(String::new()).extend_pairs(pairs).finish();
        // From here on: proc(5), clear_refs.
        let _ = std::fs::write("/proc/self/clear_refs", "5");
        let (before, start) = (peak(), Instant::now());
        let answer = ask("clearance", &entry).unwrap();
        let (seconds, grown) =
            (start.elapsed().as_secs_f64(), peak().zip(before).map_or(0, |(now, then)| now.saturating_sub(then)));
        println!("{what}: {} bytes, {grown} bytes of memory, {seconds:.1} s", text.len());
        let messages: Vec<&str> = answer.problems.iter().map(|p| p.message.as_str()).collect();
        if says.is_empty() {
            assert_eq!(messages, Vec::<&str>::new(), "{what}");
            assert!(!answer.results.is_empty(), "{what}: {:?}", answer.verdict);
        } else {
            assert!(messages.iter().any(|m| m.contains(says)), "{what}: {:.500}", format!("{messages:?}"));
            assert!(answer.results.is_empty() && messages.iter().all(|m| m.len() < 300), "{what}");
        }
        let most = COPIES * text.len().max(MEGABYTE) + ROW * text.matches("<wpt").count();
        assert!(grown < most, "{what}: {grown} bytes of {most}");
    }
}
