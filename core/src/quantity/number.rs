//! The number in an entry: digits, one decimal sign, a fraction, or degrees with minutes and seconds.

/// A number as it was typed.
#[derive(Debug, Clone, PartialEq)]
pub struct Number {
    /// Its value.
    pub value: f64,
    /// The same text with a decimal point, a plain minus and no spaces.
    pub text: String,
    /// Typed as degrees with minutes or seconds: the unit is then known.
    pub sexagesimal: bool,
    /// What else it may have meant: `1,234` is read as 1.234 but may be a thousand and more.
    pub also: Option<String>,
}

/// Why a text is not a number.
#[derive(Debug, Clone, PartialEq)]
pub enum NotANumber {
    /// No number can be seen in it.
    Unreadable,
    /// Points and commas mixed or repeated; holds what it may mean.
    Separators(Vec<String>),
    /// A number too large to work with, or a division by zero.
    OutOfReach,
}

/// Splits an entry into its number and what follows it, the unit. A minus may be any of - − – and spaces any of Unicode's.
pub fn split(text: &str) -> (String, String) {
    let plain: String = text
        .trim()
        .chars()
        .map(|c| match c {
            '−' | '–' | '‐' | '‑' => '-',
            c if c.is_whitespace() => ' ',
            c => c,
        })
        .collect();
    let mut end = 0;
    let bytes: Vec<(usize, char)> = plain.char_indices().collect();
    let next = |i: usize| bytes.get(i + 1).map(|b| b.1);
    let mut digits = false;
    for (i, &(at, c)) in bytes.iter().enumerate() {
        let exponent = digits
            && matches!(c, 'e' | 'E')
            && next(i).is_some_and(|n| {
                n.is_ascii_digit() || (matches!(n, '-' | '+') && bytes.get(i + 2).is_some_and(|b| b.1.is_ascii_digit()))
            });
        let sign_within =
            matches!(c, '-' | '+') && i > 0 && bytes.get(i - 1).is_some_and(|b| matches!(b.1, 'e' | 'E' | '/' | ':'));
        let ok = c.is_ascii_digit()
            || matches!(c, '.' | ',' | '/' | ':' | ' ')
            || (matches!(c, '-' | '+') && end == 0)
            || exponent
            || sign_within;
        if !ok {
            break;
        }
        digits |= c.is_ascii_digit();
        end = at + c.len_utf8();
    }
    let (number, unit) = plain.split_at_checked(end).unwrap_or((&plain, ""));
    (number.trim().to_owned(), unit.trim().to_owned())
}

/// Reads a number: `300`, `12,5`, `1 234.5`, `-0.2`, `1e3`, `1/7`, `1:20`.
///
/// One point or one comma is the decimal sign. Two kinds, or more than one of a kind, are never guessed at.
pub fn number(text: &str) -> Result<Number, NotANumber> {
    if let Some((above, below)) = text.split_once(['/', ':']) {
        let (above, below) = (plain(above)?, plain(below)?);
        let value = above.value / below.value;
        if !value.is_finite() {
            return Err(NotANumber::OutOfReach);
        }
        let text = format!("{}/{}", above.text, below.text);
        return Ok(Number { value, text, sexagesimal: false, also: None });
    }
    plain(text)
}

/// A number that is no fraction.
fn plain(text: &str) -> Result<Number, NotANumber> {
    let joined = join_groups(text.trim())?;
    let (points, commas) = (joined.matches('.').count(), joined.matches(',').count());
    if points + commas > 1 {
        return Err(NotANumber::Separators(meanings(&joined)));
    }
    let plain = joined.replace(',', ".");
    let body = plain.trim_start_matches(['-', '+']);
    if !body.starts_with(|c: char| c.is_ascii_digit() || c == '.') || plain.len() - body.len() > 1 {
        return Err(NotANumber::Unreadable);
    }
    let value: f64 = plain.parse().map_err(|_| NotANumber::Unreadable)?;
    if !value.is_finite() {
        return Err(NotANumber::OutOfReach);
    }
    let also = joined.split_once([',', '.']).and_then(|(whole, rest)| {
        let head = whole.trim_start_matches(['-', '+']);
        let grouped = rest.len() == 3 && (1..=3).contains(&head.len()) && !head.starts_with('0');
        (grouped && commas == 1 && rest.chars().all(|c| c.is_ascii_digit())).then(|| format!("{whole}{rest}"))
    });
    Ok(Number { value, text: plain.trim_start_matches('+').to_owned(), sexagesimal: false, also })
}

/// Takes the spaces out of `1 234,5`; a space anywhere else is two numbers.
fn join_groups(text: &str) -> Result<String, NotANumber> {
    let mut parts = text.split(' ').filter(|p| !p.is_empty());
    let mut all = parts.next().unwrap_or("").to_owned();
    if matches!(all.as_str(), "-" | "+") {
        all.push_str(parts.next().unwrap_or(""));
    }
    for part in parts {
        let whole = part.split(['.', ',']).next().unwrap_or("");
        let digits = all.trim_start_matches(['-', '+']);
        if whole.len() != 3 || all.contains(['.', ',']) || !digits.chars().all(|c| c.is_ascii_digit()) {
            return Err(NotANumber::Unreadable);
        }
        all.push_str(part);
    }
    Ok(all)
}

/// What a text with several points and commas may mean: the last one decimal, or all of them grouping.
fn meanings(text: &str) -> Vec<String> {
    let strip = |t: &str| t.replace(['.', ','], "");
    let mut found = vec![];
    if let Some(at) = text.rfind(['.', ',']) {
        let (whole, rest) = text.split_at_checked(at).unwrap_or((text, ""));
        if whole.contains(['.', ',']) && !rest.is_empty() {
            found.push(format!("{}.{}", strip(whole), strip(rest)));
        }
        found.push(strip(text));
    }
    found.retain(|t| t.parse::<f64>().is_ok_and(f64::is_finite));
    found.dedup();
    found
}

/// Reads degrees, minutes and seconds in any usual typography: `89°58′12″`, `89 58 12` is not one, `2d30m`, `10' 5"`.
///
/// The sign of the first part is the sign of all. Minutes and seconds must be below 60. `None` where it is not of that form.
pub fn sexagesimal(text: &str) -> Option<Result<Number, NotANumber>> {
    let mut plain = String::with_capacity(text.len());
    for c in text.trim().chars() {
        let c = match c {
            '−' | '–' => '-',
            '\'' | '’' => '′',
            '"' | '”' | '“' => '″',
            'º' | 'd' => '°',
            c => c,
        };
        if c == '′' && plain.ends_with('′') {
            plain.pop();
            plain.push('″');
        } else {
            plain.push(c);
        }
    }
    if !plain.contains(['°', '′', '″']) {
        return None;
    }
    let negative = plain.starts_with('-');
    let mut rest = plain.strip_prefix(['-', '+']).unwrap_or(&plain).to_owned();
    let (mut value, mut seen) = (0.0, false);
    for (sign, scale) in [('°', 1.0), ('′', 60.0), ('″', 3600.0)] {
        if let Some((part, after)) = rest.split_once(sign) {
            match number(part) {
                Ok(n) if n.value >= 0.0 && !n.text.contains(['/', '-']) && (!seen || n.value < 60.0) => {
                    value += n.value / scale
                }
                Err(e @ NotANumber::Separators(_)) => return Some(Err(e)),
                _ => return Some(Err(NotANumber::Unreadable)),
            }
            seen = true;
            rest = after.trim().to_owned();
        }
    }
    if !rest.is_empty() {
        return Some(Err(NotANumber::Unreadable));
    }
    let value = if negative { -value } else { value };
    let text = plain.replace(' ', "").replace(',', ".");
    Some(Ok(Number { value, text, sexagesimal: true, also: None }))
}
