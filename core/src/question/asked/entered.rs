//! One number as it was entered: its digits, its unit, its SI value, and what to do where one of them is missing.

use super::cell::{Wrong, clip, the};
use crate::quantity::number::{self, NotANumber, Number};
use crate::quantity::show::{Shown, significant};
use crate::quantity::unit::{Quantity, System, Unit};
use crate::question::answer::Fix;
use crate::question::field::{Aid, Field, Kind};

/// A number that was read.
pub struct Entered {
    /// Its digits.
    pub number: Number,
    /// The unit it has.
    pub unit: &'static Unit,
    /// No unit was entered with it.
    pub bare: bool,
    /// What it comes to.
    pub si: f64,
}

/// Reads `text`, in the unit it brings, else the one `picked` beside the box, else the usual one of `system`.
pub fn read(
    field: &'static Field,
    quantity: Quantity,
    system: System,
    text: &str,
    picked: &str,
) -> Result<Entered, Wrong> {
    let signed = if quantity.is_position() { Some(signed(quantity, text)?) } else { None };
    let text = signed.as_deref().unwrap_or(text);
    let usual = quantity.usual(system);
    let (digits, own) = split(quantity, text);
    let unit = if own.is_empty() { picked } else { &own };
    let bare = unit.is_empty();
    let found = if bare { Some(usual) } else { quantity.unit(unit) };
    let (number, unit) = match found {
        Some(unit) => match staff(field, &digits, unit).filter(|_| own.is_empty()) {
            Some((number, true)) => (number, unit),
            Some((number, false)) => return Err(bounced(field, text, &number, unit)),
            None => (number::number(&digits).map_err(|e| unreadable(field, text, unit, e))?, unit),
        },
        None => of_degrees(field, quantity, text).unwrap_or_else(|| Err(no_unit(field, quantity, &digits, unit)))?,
    };
    let unit = slope_as_ratio(quantity, &number, bare).unwrap_or(unit);
    let si = unit.to_si(number.value).ok_or_else(|| {
        let message =
            format!("{} cannot be {} {}: there is no such value.", field.label, clip(&number.text), unit.symbol);
        (message, vec![])
    })?;
    in_range(field, quantity, system, &number, unit, si)?;
    Ok(Entered { number, unit, bare, si })
}

/// A staff reading typed without its point, which stands after the first digit in metres and after the second in feet;
/// and whether it is certain: four digits are, five may be four of which one came twice.
fn staff(field: &Field, digits: &str, unit: &Unit) -> Option<(Number, bool)> {
    let before = match unit.symbol {
        "m" => 1,
        "ft" | "ftUS" => 2,
        _ => return None,
    };
    let plain = digits.trim_start_matches('-');
    let typed = field.aid == Some(Aid::Staff)
        && matches!(plain.len(), 4 | 5)
        && digits.len() - plain.len() < 2
        && plain.bytes().all(|b| b.is_ascii_digit());
    let (whole, rest) = plain.split_at_checked(before).filter(|_| typed)?;
    let text = format!("{}{whole}.{rest}", if plain.len() < digits.len() { "-" } else { "" });
    Some((number::number(&text).ok()?, plain.len() == 4))
}

fn bounced(field: &'static Field, text: &str, number: &Number, unit: &Unit) -> Wrong {
    let message = format!(
        "“{}” has five digits: a key may have counted twice. Enter {} with its point.",
        clip(text),
        the(field.label)
    );
    (message, vec![fix(field, &number.text, unit)])
}

/// The text that says the same by itself; `bare` keeps the number without its unit.
pub fn written(number: &Number, unit: &Unit, bare: bool) -> String {
    match unit.symbol {
        _ if bare || number.sexagesimal => number.text.clone(),
        "1 in" => format!("1 in {}", number.text),
        "1/" => format!("1/{}", number.text),
        symbol => format!("{} {symbol}", number.text),
    }
}

/// Half of a position with a sign in place of its letter: `52°10′ N`, `W 5.2`.
fn signed(quantity: Quantity, text: &str) -> Result<String, Wrong> {
    // A letter that stands alone: gon ends in one that does not.
    let alone = |letter: Option<char>, next: Option<char>| {
        letter.filter(|_| !next.is_some_and(char::is_alphabetic)).filter(|c| matches!(c, 'N' | 'S' | 'E' | 'W'))
    };
    let upper = text.to_ascii_uppercase();
    let first = alone(upper.chars().next(), upper.chars().nth(1));
    let last = alone(upper.chars().next_back(), upper.chars().nth_back(1)).filter(|_| first.is_none());
    let Some(letter) = first.or(last) else { return Ok(text.to_owned()) };
    let rest = text.get(usize::from(first.is_some())..text.len() - usize::from(last.is_some())).unwrap_or("").trim();
    if matches!(letter, 'N' | 'S') != (quantity == Quantity::Latitude) {
        let text = clip(text);
        return Err((format!("“{text}”: N and S go with a latitude, E and W with a longitude."), vec![]));
    }
    if rest.starts_with(['-', '−', '–', '+']) {
        return Err((format!("“{}” has a sign and a letter. Enter one of them.", clip(text)), vec![]));
    }
    Ok(if matches!(letter, 'S' | 'W') { format!("-{rest}") } else { rest.to_owned() })
}

/// Number and unit of a text; also `1 in 20`, and for k the forms `m = 0.07`, `k 0.13`.
fn split(quantity: Quantity, text: &str) -> (String, String) {
    let lower = text.to_ascii_lowercase();
    if quantity == Quantity::Gradient
        && let Some(rest) = lower.strip_prefix('1').and_then(|rest| rest.trim_start().strip_prefix("in "))
    {
        return (rest.trim().to_owned(), "1 in".to_owned());
    }
    if quantity == Quantity::Refraction {
        for symbol in ["factor", "k", "m"] {
            if let Some(rest) = lower.strip_prefix(symbol) {
                let (digits, after) = number::split(rest.trim_start_matches([' ', '=']));
                if after.is_empty() && !digits.is_empty() {
                    return (digits, symbol.to_owned());
                }
            }
        }
    }
    number::split(text)
}

/// `1:20` or `1/20` without a unit is a slope of one in twenty, not of a twentieth of a percent.
fn slope_as_ratio(quantity: Quantity, number: &Number, bare: bool) -> Option<&'static Unit> {
    (quantity == Quantity::Gradient && bare && number.text.contains('/')).then(|| quantity.unit("m/m"))?
}

/// Degrees, minutes and seconds, for a quantity that is an angle in one of its units.
fn of_degrees(field: &'static Field, quantity: Quantity, text: &str) -> Option<Result<(Number, &'static Unit), Wrong>> {
    let read = number::sexagesimal(text)?;
    if let Some(unit) = quantity.unit("°") {
        return Some(read.map(|n| (n, unit)).map_err(|e| unreadable(field, text, unit, e)));
    }
    if let Some(unit) = quantity.unit("″") {
        let seconds = |n: Number| (Number { value: n.value * 3600.0, ..n }, unit);
        return Some(read.map(seconds).map_err(|e| unreadable(field, text, unit, e)));
    }
    let message = format!("{}: feet and inches are not read. Enter decimal feet, as in 5.5 ft.", field.label);
    Some(Err((message, vec![])))
}

fn fix(field: &'static Field, text: &str, unit: &Unit) -> Fix {
    let shown = Shown { text: text.to_owned(), unit: unit.symbol };
    Fix { label: format!("It is {shown}"), field: field.name, cell: None, text: text.to_owned(), unit: unit.symbol }
}

fn unreadable(field: &'static Field, text: &str, unit: &Unit, why: NotANumber) -> Wrong {
    let text = clip(text);
    match why {
        NotANumber::Unreadable => {
            let message = format!("“{text}” is not a number. Enter {} as in {}.", the(field.label), field.example);
            (message, vec![])
        }
        NotANumber::Separators(meant) => {
            let message =
                format!("“{text}” has more than one point or comma. Enter {} with one of them.", the(field.label));
            (message, meant.iter().map(|m| fix(field, m, unit)).collect())
        }
        NotANumber::OutOfReach => {
            let message = format!(
                "“{text}” is no number that can be worked with. Enter {} as in {}.",
                the(field.label),
                field.example
            );
            (message, vec![])
        }
    }
}

fn no_unit(field: &'static Field, quantity: Quantity, digits: &str, unit: &str) -> Wrong {
    if digits.is_empty() {
        return (
            format!("“{}” is not a number. Enter {} as in {}.", clip(unit), the(field.label), field.example),
            vec![],
        );
    }
    let symbols: Vec<&str> = quantity.info().units.iter().map(|u| u.symbol).collect();
    let fixes = symbols.iter().filter_map(|s| quantity.unit(s)).take(2).map(|u| fix(field, digits, u)).collect();
    let message = format!("“{}” is no unit of {}. Use {}.", clip(unit), the(field.label), listed(&symbols));
    (message, if number::number(digits).is_ok() { fixes } else { vec![] })
}

/// `a, b or c`.
fn listed(words: &[&str]) -> String {
    match words {
        [] => String::new(),
        [one] => (*one).to_owned(),
        [most @ .., last] => format!("{} or {last}", most.join(", ")),
    }
}

/// This number in this unit lies within the field's range.
pub fn fits(field: &Field, unit: &Unit, number: &str) -> bool {
    let Kind::Number { min, max, .. } = field.kind else { return false };
    number.parse().ok().and_then(|v| unit.to_si(v)).is_some_and(|si| si >= min && si <= max)
}

/// Between the ends of its range, else what range that is, why, and in which other unit the number would fit.
fn in_range(
    field: &'static Field,
    quantity: Quantity,
    system: System,
    number: &Number,
    unit: &Unit,
    si: f64,
) -> Result<(), Wrong> {
    let Kind::Number { min, max, why, .. } = field.kind else { return Ok(()) };
    if si >= min && si <= max {
        return Ok(());
    }
    let end = |si: f64| end_of_range(quantity, system, si);
    let message = format!("{} must be between {} and {}: {why}.", field.label, end(min), end(max));
    let mut fixes = vec![];
    if let Some(also) = &number.also
        && fits(field, unit, also)
    {
        fixes.push(fix(field, also, unit));
    }
    let others = quantity.info().units.iter().filter_map(|u| quantity.unit(u.symbol));
    let others = others.filter(|u| u.symbol != unit.symbol && !number.sexagesimal && fits(field, u, &number.text));
    fixes.extend(others.take(2).map(|u| fix(field, &number.text, u)));
    Err((message, fixes))
}

/// An end of a range, in the largest of the usual units that keeps it a round figure.
fn end_of_range(quantity: Quantity, system: System, si: f64) -> Shown {
    let usual = quantity.usual(system);
    let larger = quantity.unit(match quantity {
        Quantity::Distance if usual.symbol == "m" => "km",
        Quantity::Distance => "mi",
        Quantity::SmallLength | Quantity::Height if usual.symbol == "mm" || usual.symbol == "m" => "m",
        _ => usual.symbol,
    });
    let unit = larger.filter(|u| u.from_si(si).is_some_and(|n| n.abs() >= 1.0)).unwrap_or(usual);
    let text = significant(unit.from_si(si).unwrap_or(0.0), 4);
    Shown { text, unit: if unit.symbol == "k" { "" } else { unit.symbol } }
}
