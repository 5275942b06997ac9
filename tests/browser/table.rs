//! A field that is a table: booked row by row, moved, struck, pasted, saved and read again.

use crate::Stage;
use farstaff::question::field::Kind;
use farstaff::question::{Answer, Field, Question, ask, catalogue};
use farstaff_tests::engine::{Engine, Key};
use farstaff_tests::steps::{Tally, check, same};
use farstaff_tests::{Result, words};
use serde_json::{Value, json};
use std::process::Command;

/// The longest entry an address carries.
const LINK_AT_MOST: usize = 8192;
/// Rows that are listed without being asked for.
const LISTED: usize = 2000;

/// The table the steps work on: the first that must be filled, whatever it asks.
#[derive(Clone, Copy)]
struct Table {
    question: &'static Question,
    field: &'static Field,
    columns: &'static [Field],
}

pub fn run(tally: &mut Tally, stage: &Stage) {
    let Some(table) = tally.step("there is a question with a table", find) else { return };
    let it = || Work { stage, table };
    tally.step("rows are booked by Enter alone, and a new one comes as the last is begun", || it().book());
    tally.step("rows are inserted, moved, struck, and come back", || it().acts());
    tally.step("what is wrong stands at its cell, in the summary too, and leads there", || it().wrong());
    tally.step("a unit is picked once for a column", || it().units());
    tally.step("a block is pasted with a preview, and undone at once", || it().paste());
    tally.step("a file that was saved is read again as it was", || it().file());
    tally.step("of 2,000 rows a key writes one, more are folded and still computed", || it().many());
    tally.step("cells say their column and row, and lie on a narrow screen", || it().named());
    // WebKit's driver does not print.
    if stage.browser.engine() != Engine::WebKit {
        tally.step("the rows are on the printed sheet", || it().printed());
    }
    tally.step("pictures of the table are taken", || it().pictures());
}

fn find() -> Result<Table> {
    let mut tables = catalogue().questions.iter().flat_map(|&question| {
        question.fields.iter().filter(|field| field.required).filter_map(move |field| match field.kind {
            // One that is booked fills itself in part; book.rs has its steps.
            Kind::Table { columns, booking: None, .. } => Some(Table { question, field, columns }),
            _ => None,
        })
    });
    tables.next().ok_or("no question needs a table".to_owned())
}

struct Work<'a> {
    stage: &'a Stage<'a>,
    table: Table,
}

impl Work<'_> {
    /// What else the question cannot do without.
    fn others(&self) -> Vec<(&'static str, &'static str)> {
        let fields = self.table.question.fields.iter();
        fields.filter(|f| f.required && f.name != self.table.field.name).map(|f| (f.name, f.example)).collect()
    }

    fn answer(&self, more: &[(&str, &str)]) -> Result<Answer> {
        let entry = farstaff_tests::entry(&[&self.others(), more].concat());
        ask(self.table.question.id, &entry).ok_or("no such question".to_owned())
    }

    fn open(&self) -> Result<farstaff_www::serve::Server> {
        let entry = farstaff_tests::entry(&self.others());
        let server = self.stage.open_at(&format!("#{}?{entry}", self.table.question.id))?;
        self.stage.browser.viewport(412, 915)?;
        Ok(server)
    }

    /// The page must come to hold the entry that the native code makes of these rows.
    fn holds_with(&self, text: &str, more: &[(&str, &str)]) -> Result<()> {
        let answer = self.answer(&[&[(self.table.field.name, text)], more].concat())?;
        check(answer.entry.len() <= LINK_AT_MOST, || "too long for an address".to_owned())?;
        let wanted = json!(format!("#{}?{}", self.table.question.id, answer.entry));
        self.stage.browser.wait(&format!("location.hash === {wanted}")).map_err(|error| format!("{text:?}: {error}"))
    }

    fn holds(&self, text: &str) -> Result<()> {
        self.holds_with(text, &[])
    }

    /// Columns that a phone shows at once.
    fn plain(&self) -> Vec<usize> {
        let plain = |column: &Field| column.group.is_empty() && column.when.is_none();
        (0..self.table.columns.len()).filter(|at| plain(&self.table.columns[*at])).collect()
    }

    fn first_number(&self) -> Result<usize> {
        let numbers = |at: &usize| matches!(self.table.columns[*at].kind, Kind::Number { .. });
        self.plain().into_iter().find(numbers).ok_or("no column of numbers".to_owned())
    }

    fn cell(&self, row: usize, column: usize) -> String {
        format!("#{}-{row}-{column}", self.table.field.name)
    }

    /// A row that holds one number. The tab after it says that it is one cell, whatever it holds.
    fn row(&self, text: &str) -> Result<String> {
        Ok("\t".repeat(self.first_number()?) + text + "\t")
    }

    fn rows(&self, numbers: &[&str]) -> Result<String> {
        Ok(numbers.iter().map(|text| self.row(text)).collect::<Result<Vec<_>>>()?.join("\n"))
    }

    /// Opens a row, counted from 1, if it is closed.
    fn open_row(&self, row: usize) -> Result<()> {
        let browser = self.stage.browser;
        let closed = format!(".row:nth-child({row}):not(.open) .brief");
        if browser.js(&format!("return !!document.querySelector({})", json!(closed)))? == json!(true) {
            browser.tap(&closed)?;
        }
        browser.wait(&format!("document.querySelector('.row:nth-child({row}).open .edit')"))
    }

    /// Puts rows in by the window for pasting, in place of all.
    fn give(&self, text: &str) -> Result<()> {
        let browser = self.stage.browser;
        browser.tap("[data-do=bring]")?;
        browser.wait("document.querySelector('dialog[open]')")?;
        browser.js(&format!(
            "const area = document.querySelector('dialog textarea'); area.value = {};
            area.dispatchEvent(new Event('input')); return 0;",
            json!(text)
        ))?;
        browser.tap(".ways button:last-child")?;
        browser.wait("!document.querySelector('dialog')")
    }

    fn book(&self) -> Result<()> {
        let browser = self.stage.browser;
        let _server = self.open()?;
        browser.tap(&self.cell(0, self.plain()[0]))?;
        let mut text = vec![];
        for row in 0..3 {
            let mut cells = vec![String::new(); self.table.columns.len()];
            for column in self.plain() {
                browser.wait(&format!("document.activeElement.matches({})", json!(self.cell(row, column))))?;
                if let Kind::Number { .. } | Kind::Text { .. } = self.table.columns[column].kind {
                    browser.keys(&format!("{row}{column}"))?;
                    cells[column] = format!("{row}{column}");
                    same(browser.js("return document.querySelectorAll('.row').length")?, json!(row + 2))?;
                }
                browser.key(Key::Enter)?;
            }
            text.push(cells.join("\t"));
        }
        self.holds(&text.join("\n"))?;
        // Nothing in the row to come: on, past the table.
        for _ in self.plain() {
            browser.key(Key::Enter)?;
        }
        browser.wait("!document.activeElement.closest('.row')")?;
        self.holds(&text.join("\n"))
    }

    fn acts(&self) -> Result<()> {
        let browser = self.stage.browser;
        let _server = self.open()?;
        let begin = self.rows(&["1", "2", "3"])?;
        self.give(&begin)?;
        self.holds(&begin)?;
        let act = |row: usize, what: &str, wanted: &[&str]| -> Result<()> {
            self.open_row(row)?;
            browser.tap(&format!(".edit [data-do={what}]"))?;
            self.holds(&self.rows(wanted)?)
        };
        act(3, "up", &["1", "3", "2"])?;
        act(1, "down", &["3", "1", "2"])?;
        act(2, "insert", &["3", "", "1", "2"])?;
        // Where a row was put in, it is ready for typing.
        let typed = self.cell(1, self.first_number()?);
        browser.enter(&typed, "9")?;
        self.holds(&self.rows(&["3", "9", "1", "2"])?)?;
        browser.tap(".edit [data-do=strike]")?;
        let struck = self.rows(&["3", "9", "1", "2"])?.replace(&self.row("9")?, &format!("~{}", self.row("9")?));
        self.holds(&struck)?;
        same(browser.js("return document.querySelectorAll('.row.struck').length")?, json!(1))?;
        same(browser.js(&format!("return document.querySelector({}).readOnly", json!(typed)))?, json!(true))?;
        browser.tap("#undo")?;
        self.holds(&self.rows(&["3", "9", "1", "2"])?)?;
        browser.tap("#redo")?;
        self.holds(&struck)?;
        act(2, "strike", &["3", "9", "1", "2"])?;
        for wanted in [vec!["3", "", "1", "2"], vec!["3", "1", "2"], vec!["1", "3", "2"], vec!["1", "2", "3"]] {
            // Striking and taking it back are two acts, typing one.
            for _ in 0..if wanted[1].is_empty() { 3 } else { 1 } {
                browser.tap("#undo")?;
            }
            self.holds(&self.rows(&wanted)?)?;
        }
        Ok(())
    }

    fn wrong(&self) -> Result<()> {
        let browser = self.stage.browser;
        let _server = self.open()?;
        let column = self.first_number()?;
        let cell = self.cell(1, column);
        self.give(&self.rows(&["1", "2"])?)?;
        self.open_row(2)?;
        browser.enter(&cell, "abc")?;
        let shown = "const text = (css) => [...document.querySelectorAll(css)].map((each) => each.textContent);
            return [text('.row:nth-child(2) .wrongs p'), text('#problems a')];";
        let text = self.rows(&["1", "abc"])?;
        let answer = self.answer(&[(self.table.field.name, &text)])?;
        let message = |row: usize| {
            let here = |cell: Option<farstaff::question::answer::Cell>| cell.is_some_and(|cell| cell.row == row);
            let found = answer.problems.iter().filter(|problem| here(problem.cell));
            found.map(|problem| problem.message.clone()).collect::<Vec<_>>()
        };
        let all: Vec<String> = answer.problems.iter().map(|problem| problem.message.clone()).collect();
        let abc = message(1).into_iter().find(|text| text.contains("abc")).ok_or("nobody says that abc is wrong")?;
        // Not yet while it is being typed.
        check(!browser.js(shown)?.to_string().contains("abc"), || "said too early".to_owned())?;
        self.open_row(3)?;
        browser.wait("document.querySelector('.row:nth-child(2) .wrongs p')")?;
        same(browser.js(shown)?, json!([message(1), all]))?;
        same(browser.js("return document.querySelectorAll('.row:nth-child(2) .off').length > 0")?, json!(true))?;
        let link = all.iter().position(|text| *text == abc).ok_or("not in the summary")? + 1;
        browser.tap(&format!("#problems li:nth-child({link}) a"))?;
        browser.wait(&format!("document.activeElement.matches({})", json!(cell)))?;
        same(browser.js("return document.activeElement.getAttribute('aria-invalid')")?, json!("true"))?;
        browser.enter(&cell, "5")?;
        self.holds(&self.rows(&["1", "5"])?)?;
        check(!browser.js(shown)?.to_string().contains("abc"), || "still said".to_owned())
    }

    fn units(&self) -> Result<()> {
        let browser = self.stage.browser;
        let _server = self.open()?;
        let at = self.first_number()?;
        let Kind::Number { quantity, .. } = self.table.columns[at].kind else { return Err("no number".to_owned()) };
        let unit = quantity.info().units.last().ok_or("no unit")?.symbol;
        self.give(&self.rows(&["1", "2"])?)?;
        browser.tap("[data-do=heads]")?;
        browser.js(&format!(
            "const list = document.querySelectorAll('.head select')[{at}]; list.value = {};
            list.dispatchEvent(new Event('change')); return 0;",
            json!(unit)
        ))?;
        let name = format!("{}.{}.unit", self.table.field.name, self.table.columns[at].name);
        self.holds_with(&self.rows(&["1", "2"])?, &[(&name, unit)])
    }

    fn paste(&self) -> Result<()> {
        let browser = self.stage.browser;
        let _server = self.open()?;
        let column = self.first_number()?;
        self.give(&self.rows(&["1", "2"])?)?;
        self.open_row(2)?;
        let cell = self.cell(1, column);
        browser.tap(&cell)?;
        // One column, as a spreadsheet copies it, with decimal commas.
        browser.js(&format!(
            "const event = new Event('paste', {{ bubbles: true, cancelable: true }});
            // Firefox lets no script fill the clipboard of an event.
            Object.defineProperty(event, 'clipboardData', {{ value: {{ getData: () => '7,5\\n8,5\\n' }} }});
            document.querySelector({}).dispatchEvent(event); return 0;",
            json!(cell)
        ))?;
        browser.wait("document.querySelector('dialog[open] .preview tbody')")?;
        browser.js(
            "const one = document.querySelector('dialog [type=checkbox]'); if (!one.checked) one.click(); return 0;",
        )?;
        let preview = browser.text("dialog .preview")?;
        check(preview.contains("7,5") && preview.contains("8,5"), || format!("the preview says {preview:?}"))?;
        self.holds(&self.rows(&["1", "2"])?)?;
        browser.js("[...document.querySelectorAll('.ways button')].find((key) => key.textContent.startsWith('Write over')).click(); return 0;")?;
        self.holds(&self.rows(&["1", "7,5", "8,5"])?)?;
        browser.tap("#undo")?;
        self.holds(&self.rows(&["1", "2"])?)
    }

    fn file(&self) -> Result<()> {
        let browser = self.stage.browser;
        let _server = self.open()?;
        let point = self.rows(&["1.5", "-2", "3"])? + "\n~" + &self.row("4")?;
        for (key, decimal, separator) in [("comma", ",", ";"), ("point", ".", ",")] {
            self.give(&point.replace('.', if decimal == "," { "." } else { "," }))?;
            browser.js("document.querySelector('[data-do=comma]').closest('details').open = true; return 0;")?;
            let saved = browser.js(&format!(
                "const make = URL.createObjectURL; let made;
                URL.createObjectURL = (blob) => {{ made = blob; return make.call(URL, blob); }};
                document.querySelector('[data-do={key}]').click(); URL.createObjectURL = make; return made.text();"
            ))?;
            let saved = saved.as_str().ok_or("nothing was saved")?.trim_start_matches('\u{feff}').to_owned();
            let lines: Vec<&str> = saved.lines().collect();
            check(lines.len() == 5 && lines[0].contains(separator), || format!("{saved:?}"))?;
            check(saved.contains(&format!("1{decimal}5")), || format!("no decimals of its own: {saved:?}"))?;
            self.give(&saved)?;
            self.holds(&point.replace('.', decimal))?;
        }
        Ok(())
    }

    fn many(&self) -> Result<()> {
        let browser = self.stage.browser;
        let _server = self.open()?;
        let numbers: Vec<String> = (0..LISTED).map(|row| row.to_string()).collect();
        let numbers: Vec<&str> = numbers.iter().map(String::as_str).collect();
        self.give(&self.rows(&numbers)?)?;
        same(browser.js("return document.querySelectorAll('.row').length")?, json!(LISTED + 1))?;
        // What a key writes into the page's rows: no more than into a table of three.
        let count = "document.querySelectorAll('.row .brief')[AT].click();
            await new Promise((done) => setTimeout(done, 1500));
            let count = 0;
            const watch = new MutationObserver((all) => { count += all.length; });
            watch.observe(document.querySelector('.rows'), { subtree: true, childList: true, attributes: true, characterData: true });
            const box = document.querySelectorAll('.edit input')[0];
            box.value += '1'; box.dispatchEvent(new Event('input', { bubbles: true }));
            await new Promise((done) => setTimeout(done, 500));
            return count;";
        let many = browser.js(&count.replace("AT", "1000"))?.as_u64().ok_or("no count")?;
        self.give(&self.rows(&["0", "1", "2"])?)?;
        let few = browser.js(&count.replace("AT", "1"))?.as_u64().ok_or("no count")?;
        check(many <= few, || format!("{many} writes, {few} in a table of three rows"))?;
        let text = self.rows(&[&numbers[..], &["5"]].concat())?;
        self.give(&text)?;
        same(browser.js("return document.querySelectorAll('.row').length")?, json!(0))?;
        let answer = self.answer(&[(self.table.field.name, &text)])?;
        let echo = answer.read.iter().find(|read| read.field == self.table.field.name).ok_or("not read")?.echo.clone();
        same(browser.text(".table .echo")?, echo)?;
        browser.tap(".fold button")?;
        browser.wait(&format!("document.querySelectorAll('.row').length === {}", LISTED + 2))
    }

    fn named(&self) -> Result<()> {
        let browser = self.stage.browser;
        let _server = self.open()?;
        self.give(&self.rows(&["1", "2"])?)?;
        self.open_row(2)?;
        let said = browser.js(
            "return [...document.querySelectorAll('.edit .cell :is(input, select)')].map((box) => box
                .getAttribute('aria-labelledby').split(' ').map((id) => document.getElementById(id).textContent).join(' '))",
        )?;
        for (at, column) in self.table.columns.iter().enumerate() {
            let said = said[at].as_str().unwrap_or("");
            check(said.starts_with(column.label) && said.ends_with('2'), || format!("column {at} says {said:?}"))?;
        }
        // Every stop has its own name, and every target is large enough for a glove.
        for (width, theme) in [(320, "light"), (320, "sun"), (412, "night"), (1280, "light")] {
            browser.viewport(width, 740)?;
            browser.js(&format!("document.querySelector('[name=theme][value={theme}]').click(); return 0;"))?;
            let found = browser.js(
                "const boxes = [...document.querySelectorAll('.table :is(button, input, select)')]
                    .filter((each) => each.checkVisibility()).map((each) => [each.outerHTML.slice(0, 90), each.getBoundingClientRect()]);
                return [document.documentElement.scrollWidth > innerWidth ? 'the page scrolls sideways' : null, ...boxes
                    .filter(([, box]) => box.height < 47.9 || box.right > innerWidth + 0.5).map(([what]) => what)].filter(Boolean);",
            )?;
            same(found, json!([])).map_err(|error| format!("{width} wide, {theme}: {error}"))?;
        }
        browser.viewport(412, 915).map(drop)
    }

    fn printed(&self) -> Result<()> {
        let browser = self.stage.browser;
        let _server = self.open()?;
        self.give(&self.rows(&["1234", "5678"])?)?;
        self.holds(&self.rows(&["1234", "5678"])?)?;
        let file = self.stage.out.join(format!("{}-table.pdf", browser.engine()));
        browser.print(&file)?;
        let read = Command::new("pdftotext").arg("-layout").arg(&file).arg("-").output().map_err(words)?;
        let text = String::from_utf8_lossy(&read.stdout).replace('\u{fb01}', "fi").replace('\u{fb02}', "fl");
        let both = text.contains("1234") && text.contains("5678");
        check(both && text.contains(self.table.field.label), || format!("{text:.900}"))
    }

    fn pictures(&self) -> Result<()> {
        let browser = self.stage.browser;
        let _server = self.open()?;
        self.give(&self.rows(&["0", "120", "abc"])?)?;
        self.open_row(2)?;
        for (width, height) in [(360, 740), (412, 915), (1280, 900)] {
            browser.viewport(width, height)?;
            for theme in ["light", "sun", "night"] {
                browser.js(&format!("document.querySelector('[name=theme][value={theme}]').click(); return 0;"))?;
                browser.js("document.querySelector('.rows').scrollIntoView(); await new Promise(requestAnimationFrame); return 0;")?;
                let name = format!("{}-table-{width}-{theme}.png", browser.engine());
                browser.screenshot(&self.stage.out.join(name))?;
            }
        }
        let back: Value = browser.js("document.querySelector('[name=theme][value=light]').click(); return 0;")?;
        same(back, json!(0))
    }
}
