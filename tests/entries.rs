//! Any text in any field yields problems or an answer, never a panic and never a number that is none.

use farstaff::question::field::Kind;
use farstaff::question::{Question, ask, catalogue};
use farstaff_tests::sound::faults;

/// Knuth's 64-bit linear congruence (MMIX constants): the same texts on every machine.
struct Dice(u64);

impl Dice {
    fn roll(&mut self, sides: usize) -> usize {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 33) as usize % sides
    }
    fn pick<'a, T: ?Sized>(&mut self, from: &[&'a T]) -> &'a T {
        from[self.roll(from.len())]
    }
}

const SCRAPS: &[&str] = &[
    "",
    " ",
    "0",
    "-0",
    "1",
    "300",
    "0.3",
    "1e308",
    "1e-308",
    "-1e9",
    "1e999",
    "NaN",
    "inf",
    "-inf",
    "null",
    "1/0",
    "0/0",
    "1/7",
    "1:20",
    "1 in 20",
    "1 in 0",
    ".",
    ",",
    "-",
    "−5",
    "–",
    "1,234",
    "1.234,5",
    "1 234 567,8",
    "12,5",
    "١٢٣",
    "１２",
    "٫",
    "5'6\"",
    "89°58′12″",
    "°",
    "′",
    "″",
    "-10″",
    "2°30",
    " m",
    "mm",
    " ft",
    "ftUS",
    "km",
    "mi",
    " mm/m",
    "%",
    "‰",
    "k",
    "m",
    "factor",
    "1/",
    "gon",
    "mgon",
    "of 1",
    "ft/100 ft",
    "m/m",
    "=",
    "&",
    "+",
    "%41",
    "%ff",
    "\u{0}",
    "\u{202e}",
    "\u{a0}",
    "🦔",
    "ß",
    "<b>",
    "'",
    "\n",
    "\t",
    "e",
    "E5",
    "--5",
    "+-5",
    "5 5",
    "5 m m",
    "abc",
    "sunny",
    "raw",
    "Sky",
    "none",
];

fn text(dice: &mut Dice, question: &Question, field: usize) -> String {
    let field = &question.fields[field % question.fields.len()];
    match dice.roll(6) {
        0 => field.example.to_owned(),
        1 => (0..=dice.roll(3)).map(|_| dice.pick(SCRAPS)).collect(),
        2 => {
            let mut letters: Vec<char> = field.example.chars().collect();
            let at = dice.roll(letters.len());
            letters[at] = dice.pick(SCRAPS).chars().next().unwrap_or(' ');
            letters.into_iter().collect()
        }
        3 => match field.kind {
            Kind::Number { quantity, .. } => {
                let number = (dice.roll(2_000_001) as f64 - 1e6) * libm::pow(10.0, dice.roll(12) as f64 - 9.0);
                let units = quantity.info().units;
                format!("{number} {}", units[dice.roll(units.len())].symbol)
            }
            Kind::Text { .. } => dice.pick(SCRAPS).to_owned(),
            Kind::Table { .. } => scraps_in_rows(dice),
            Kind::Choice { options, .. } => options[dice.roll(options.len())].value.to_owned(),
        },
        4 => char::from_u32(dice.roll(0x11_0000) as u32).map_or(String::new(), |c| c.to_string()),
        _ => String::new(),
    }
}

/// Lines of cells, ragged, with any separator and any text.
fn scraps_in_rows(dice: &mut Dice) -> String {
    let separator = dice.pick(&["\t", ";", ",", " ", "\t\t"]);
    let line = |dice: &mut Dice| {
        let cells: Vec<&str> = (0..dice.roll(8)).map(|_| dice.pick(SCRAPS)).collect();
        format!("{}{}", dice.pick(&["", "", "", "~"]), cells.join(separator))
    };
    let lines: Vec<String> = (0..dice.roll(12)).map(|_| line(dice)).collect();
    lines.join(dice.pick(&["\n", "\r\n", "\n\n"]))
}

#[test]
fn any_text_is_answered() {
    let mut dice = Dice(20_261_201);
    let (mut answered, mut refused) = (0, 0);
    for question in catalogue().questions {
        for round in 0..3000 {
            let mut form = form_urlencoded::Serializer::new(String::new());
            // In every second round what is required is right, so that the rest is read on and answered.
            for (i, field) in question.fields.iter().enumerate() {
                let sound = round % 2 == 0 && (field.required || dice.roll(4) > 0);
                let entered = if sound { field.example.to_owned() } else { text(&mut dice, question, i) };
                form.append_pair(field.name, &entered);
                if dice.roll(5) == 0 {
                    form.append_pair(&format!("{}.unit", field.name), dice.pick(SCRAPS));
                }
            }
            let entry = form.finish();
            let answer = ask(question.id, &entry).expect("it is a question");
            assert_eq!(faults(question, &answer), Vec::<String>::new(), "{} {entry}", question.id);
            let again = ask(question.id, &answer.entry).expect("it is a question");
            assert_eq!(again.entry, answer.entry, "{} {entry}", question.id);
            if answer.problems.is_empty() { answered += 1 } else { refused += 1 }
        }
    }
    assert!(answered > 300 && refused > 300, "{answered} answered, {refused} refused: the texts have gone one-sided");
}

#[test]
fn bytes_that_are_no_form_are_answered_too() {
    let mut dice = Dice(7);
    for question in catalogue().questions {
        for _ in 0..2000 {
            let entry: String = (0..dice.roll(12)).map(|_| dice.pick(SCRAPS)).collect();
            let answer = ask(question.id, &entry).expect("it is a question");
            assert_eq!(faults(question, &answer), Vec::<String>::new(), "{} {entry}", question.id);
        }
    }
}

#[test]
fn an_unknown_question_has_no_answer() {
    assert!(ask("no such question", "").is_none());
}
