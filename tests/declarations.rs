//! What holds for every question, as declared.

use farstaff::quantity::unit::Quantity;
use farstaff::question::field::{Aid, Kind};
use farstaff::question::{Field, Question, ask, catalogue};
use farstaff_tests::sound::faults;
use std::collections::{BTreeMap, BTreeSet};

fn questions() -> &'static [&'static Question] {
    catalogue().questions
}

fn form<'a>(pairs: impl IntoIterator<Item = (&'a str, &'a str)>) -> String {
    form_urlencoded::Serializer::new(String::new()).extend_pairs(pairs).finish()
}

/// What a person must enter, by each field's own example.
fn required(question: &Question) -> Vec<(&'static str, &'static str)> {
    question.fields.iter().filter(|f| f.required).map(|f| (f.name, f.example)).collect()
}

/// The choice a field hangs on, if any, is so by default.
fn asked_at_first(question: &Question, field: &Field) -> bool {
    field.when.is_none_or(|when| {
        let choice = question.fields.iter().find(|f| f.name == when.field);
        choice.is_some_and(|choice| when.values.contains(&choice.default))
    })
}

/// What must be chosen for a field to be asked.
fn so_that_it_is_asked(field: &Field) -> Option<(&'static str, &'static str)> {
    let when = field.when?;
    Some((when.field, when.values.first()?))
}

fn unique<'a>(names: impl IntoIterator<Item = &'a str>) -> bool {
    let mut seen = BTreeSet::new();
    names.into_iter().all(|name| seen.insert(name))
}

#[test]
fn names_are_unique_and_shared_fields_are_one() {
    assert!(unique(questions().iter().map(|q| q.id)));
    let mut shared: BTreeMap<&str, String> = BTreeMap::new();
    for question in questions() {
        assert!(unique(question.fields.iter().map(|f| f.name)), "{}", question.id);
        assert!(unique(question.results.iter().map(|r| r.name)), "{}", question.id);
        for (at, field) in question.fields.iter().enumerate() {
            let Some(when) = field.when else { continue };
            let choice = question.fields[..at].iter().find(|f| f.name == when.field).map(|f| f.kind);
            let Some(Kind::Choice { options, .. }) = choice else {
                panic!("{}: hangs on no choice before it", field.name)
            };
            let known = |value: &&str| options.iter().any(|o| o.value == *value);
            assert!(!when.values.is_empty() && when.values.iter().all(known), "{}", field.name);
        }
        for field in question.fields.iter().filter(|f| f.shared) {
            let declared = format!("{field:?}");
            assert_eq!(*shared.entry(field.name).or_insert(declared.clone()), declared, "{}", field.name);
        }
    }
}

#[test]
fn every_field_says_what_it_is() {
    for question in questions() {
        say_what_they_are(question.id, question.fields);
    }
}

fn say_what_they_are(of: &str, fields: &[Field]) {
    for field in fields {
        let name = format!("{of} {}", field.name);
        assert!(!field.label.is_empty() && !field.help.is_empty() && !field.example.is_empty(), "{name}");
        assert!(!field.required || field.default.is_empty(), "{name}: required and assumed at once");
        match field.kind {
            Kind::Number { min, max, why, negative, .. } => {
                assert!(min < max && !why.is_empty() && negative == (min < 0.0), "{name}");
            }
            Kind::Text { most, why } => assert!(most > 0 && !why.is_empty(), "{name}"),
            Kind::Table { columns, row, most, why, .. } => {
                assert!(columns.len() > 1 && !row.is_empty() && most > 1 && !why.is_empty(), "{name}");
                assert!(unique(columns.iter().map(|c| c.name)) && unique(columns.iter().map(|c| c.label)), "{name}");
                assert!(columns.iter().all(|c| !matches!(c.kind, Kind::Table { .. })), "{name}: a table in a table");
                say_what_they_are(&name, columns);
            }
            Kind::Choice { options, why } => {
                assert!(options.len() > 1 && !why.is_empty(), "{name}");
                assert!(unique(options.iter().map(|o| o.value)) && unique(options.iter().map(|o| o.label)), "{name}");
            }
        }
    }
}

#[test]
fn what_spares_keys_fits_its_field() {
    let mut seen = 0;
    for question in questions() {
        let columns = question.fields.iter().filter_map(|f| match f.kind {
            Kind::Table { columns, .. } => Some(columns),
            _ => None,
        });
        for field in question.fields.iter().chain(columns.flatten()) {
            let fits = match field.aid {
                None => true,
                Some(Aid::Staff) => matches!(field.kind, Kind::Number { quantity: Quantity::Height, .. }),
                Some(Aid::Numbered | Aid::Stamped) => matches!(field.kind, Kind::Text { .. }),
            };
            assert!(fits, "{} {}", question.id, field.name);
            if let Kind::Table { booking: Some(booking), .. } = field.kind {
                let known = |name: &str| question.fields.iter().any(|f| f.name == name);
                assert!(booking.pause.is_none_or(|p| p.after > 0 && !p.text.is_empty() && known(p.field)));
                seen += 1;
            }
        }
    }
    assert!(seen > 0, "no table is booked");
}

#[test]
fn every_question_says_what_it_gives_and_whence() {
    for question in questions() {
        assert!(!question.phrase.is_empty() && !question.about.is_empty(), "{}", question.id);
        assert!(!question.sources.is_empty() && !question.cautions.is_empty(), "{}", question.id);
        assert!(question.cautions.iter().all(|c| !c.text.is_empty() && !c.governed_by.is_empty()), "{}", question.id);
        assert!(question.results.iter().all(|r| !r.label.is_empty() && !r.meaning.is_empty()), "{}", question.id);
    }
}

#[test]
fn every_default_answers_and_gives_every_promised_result() {
    for question in questions() {
        let answer = ask(question.id, &form(required(question))).expect("it is a question");
        assert!(answer.problems.is_empty(), "{}: {:?}", question.id, answer.problems);
        let given: Vec<&str> = answer.results.iter().map(|r| r.name).collect();
        let promised: Vec<&str> = question.results.iter().map(|r| r.name).collect();
        assert_eq!(given, promised, "{}", question.id);
        assert!(answer.figure.is_some() && !answer.working.is_empty(), "{}", question.id);
        assert_eq!(faults(question, &answer), Vec::<String>::new(), "{}", question.id);
    }
}

#[test]
fn nothing_entered_asks_for_what_is_required_and_for_nothing_else() {
    for question in questions() {
        let answer = ask(question.id, "").expect("it is a question");
        let missing: Vec<&str> = answer.problems.iter().map(|p| p.field).collect();
        let wanted = question.fields.iter().filter(|f| f.required && asked_at_first(question, f));
        let wanted: Vec<&str> = wanted.map(|f| f.name).collect();
        assert_eq!(missing, wanted, "{}", question.id);
    }
}

/// Entries for one field that are right: its example, its default, the ends of its range, each choice.
fn right(field: &Field) -> Vec<String> {
    let mut entries = vec![field.example.to_owned(), field.default.to_owned()];
    match field.kind {
        Kind::Text { .. } | Kind::Table { .. } => {}
        Kind::Choice { options, .. } => entries.extend(options.iter().map(|o| o.value.to_owned())),
        Kind::Number { quantity, min, max, .. } => {
            for unit in quantity.info().units {
                let unit = quantity.unit(unit.symbol).expect("its own unit");
                for end in [min, max] {
                    // An end that the unit cannot say to the last bit may fall outside: it is then no entry that is right.
                    let said = unit.from_si(end).filter(|n| unit.to_si(*n) == Some(end));
                    entries.extend(said.map(|n| written(n, unit.symbol)));
                }
            }
        }
    }
    entries
}

fn written(number: f64, symbol: &str) -> String {
    match symbol {
        "1 in" => format!("1 in {number}"),
        "1/" => format!("1/{number}"),
        _ => format!("{number} {symbol}"),
    }
}

#[test]
fn whole_ranges_answer_and_canonical_entries_say_the_same() {
    let mut asked = 0;
    for question in questions() {
        for field in question.fields {
            for text in right(field) {
                let entry = form(
                    required(question)
                        .into_iter()
                        .filter(|p| p.0 != field.name)
                        .chain(so_that_it_is_asked(field))
                        .chain([(field.name, text.as_str())]),
                );
                let answer = ask(question.id, &entry).expect("it is a question");
                let ok = answer.problems.is_empty() || (field.required && text.is_empty());
                assert!(ok, "{} {}: {text}: {:?}", question.id, field.name, answer.problems);
                assert_eq!(faults(question, &answer), Vec::<String>::new(), "{} {}: {text}", question.id, field.name);
                let again = ask(question.id, &answer.entry).expect("it is a question");
                assert_eq!(again.entry, answer.entry, "{} {}: {text}", question.id, field.name);
                assert_eq!(again.verdict, answer.verdict, "{} {}: {text}", question.id, field.name);
                assert_eq!(again.results, answer.results, "{} {}: {text}", question.id, field.name);
                asked += 1;
            }
        }
    }
    assert!(asked > 100, "{asked}");
}
