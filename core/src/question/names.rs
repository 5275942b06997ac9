//! Names that count on by themselves.

/// The name after this one: its last number goes up by one and keeps its width, `CP 9` → `CP 10`, `B09` → `B10`. A name
/// without a number at its end gets a 2, as the second of its kind: `Mark` → `Mark 2`. Nothing is followed by `1`.
pub fn next(name: &str) -> String {
    let head = name.trim_end_matches(|c: char| c.is_ascii_digit());
    let number = name.get(head.len()..).unwrap_or("");
    match number.parse::<u64>() {
        Ok(n) => format!("{head}{:0width$}", n.saturating_add(1), width = number.len()),
        Err(_) if name.is_empty() => "1".to_owned(),
        Err(_) => format!("{name} 2"),
    }
}

#[cfg(test)]
mod tests {
    use super::next;

    #[test]
    fn names_count_on() {
        for (name, after) in [
            ("", "1"),
            ("7", "8"),
            ("CP 7", "CP 8"),
            ("CP 9", "CP 10"),
            ("B09", "B10"),
            ("B099", "B100"),
            ("Mark", "Mark 2"),
            ("Ufer ö1", "Ufer ö2"),
            // More digits than a number of 64 bits has: no number to count on.
            ("99999999999999999999", "99999999999999999999 2"),
        ] {
            assert_eq!(next(name), after, "{name}");
        }
    }
}
