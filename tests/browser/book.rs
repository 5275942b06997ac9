//! A table that is booked row by row by a thumb: digits, names and times by themselves, the reading said back, a browser
//! that is killed, and what is asked after a pause.

use crate::Stage;
use crate::kept::in_store;
use farstaff::question::ask;
use farstaff_tests::Result;
use farstaff_tests::child::Scratch;
use farstaff_tests::engine::{Browser, Engine, Key};
use farstaff_tests::steps::{Tally, check, same};
use farstaff_www::serve::Server;
use serde_json::json;
use std::rc::Rc;

/// Keyed at one go.
const SETUPS: usize = 60;
/// The browser is killed so often meanwhile.
const KILLS: usize = 10;
/// Chooses the moments, the same ones in each run.
const SEED: u64 = 0x5eed_1e7e1;
/// The columns that are typed, and one that is stamped.
const BACK: usize = 1;
const FORE: usize = 3;
const DISTANCE: usize = 4;
const TIME: usize = 10;
/// Milliseconds after which a reading is said to those who cannot see it; as in www/page/booked.js.
const SAID_AFTER: u64 = 1000;

pub fn run(tally: &mut Tally, stage: &Stage) {
    tally.step("four digits are a reading, said back, and announced once", || digits(stage));
    tally.step("points are named and rows are stamped by themselves, never over what was typed", || names(stage));
    tally.step("undo lies under the thumb, and takes a row back as it was begun", || undo(stage));
    tally.step("after a pause the page stands where it was, and asks what has moved", || pause(stage));
    tally.step("headings and cautions stand at their rows, and nothing moves under the thumb", || told(stage));
    // Under its driver WebKit keeps nothing on disk.
    if stage.browser.engine() == Engine::WebKit {
        tally.step("sixty setups are keyed by a thumb", || thumb(stage));
    } else {
        tally.step("sixty setups are keyed, the browser killed ten times, nothing that was saved is lost", || {
            killed(stage)
        });
    }
}

/// What belongs into a row: its name, the column of its reading, that reading, its distance.
struct Shot {
    point: String,
    column: usize,
    reading: String,
    distance: String,
}

/// Row after row of a run: back and fore sights by turns, invented.
fn shots() -> Vec<Shot> {
    let shot = |row: usize| {
        let (column, point) = match row % 2 {
            0 => (BACK, row / 2),
            _ => (FORE, row / 2 + 1),
        };
        Shot {
            point: if point == 0 { "BM 4".to_owned() } else { format!("CP {point}") },
            column,
            reading: format!("{:04}", 612 + row * 379 % 2150),
            distance: (24 + row * 7 % 19).to_string(),
        }
    };
    (0..2 * SETUPS).map(shot).collect()
}

/// The cells of the rows as the page keeps them, each without its time.
fn rows(browser: &Browser) -> Result<Vec<Vec<String>>> {
    let text =
        browser.js("const { record } = await import('./store.js'); return record('question-book').entry.book ?? ''")?;
    let cells = |line: &str| {
        let cells = line.trim_end_matches('\t').split('\t').enumerate();
        let mut cells: Vec<String> =
            cells.map(|(at, cell)| if at == TIME { String::new() } else { cell.to_owned() }).collect();
        while cells.last().is_some_and(String::is_empty) {
            cells.pop();
        }
        cells
    };
    Ok(text.as_str().ok_or("no text")?.split('\n').map(cells).filter(|cells| !cells.is_empty()).collect())
}

/// The cells of a row of which so many characters of reading and distance were typed.
fn typed(shot: &Shot, reading: usize, distance: usize) -> Vec<String> {
    let mut cells = vec![String::new(); DISTANCE + 1];
    cells[0].clone_from(&shot.point);
    cells[shot.column] = shot.reading[..reading].to_owned();
    cells[DISTANCE] = shot.distance[..distance].to_owned();
    while cells.last().is_some_and(String::is_empty) {
        cells.pop();
    }
    cells
}

fn whole(shots: &[Shot]) -> Vec<Vec<String>> {
    shots.iter().map(|shot| typed(shot, shot.reading.len(), shot.distance.len())).collect()
}

fn cell(row: usize, column: usize) -> String {
    format!("#book-{row}-{column}")
}

fn focused(browser: &Browser, row: usize, column: usize) -> Result<()> {
    browser.wait(&format!("document.activeElement.matches({})", json!(cell(row, column))))
}

fn enter_key() -> Result<char> {
    char::from_u32(Key::Enter as u32).ok_or("no such key".to_owned())
}

/// Opens the book on a phone's screen and names the first mark.
fn begin(stage: &Stage) -> Result<Server> {
    let server = stage.open_at("#book")?;
    stage.browser.viewport(360, 740)?;
    name_first(stage.browser)?;
    Ok(server)
}

fn name_first(browser: &Browser) -> Result<()> {
    browser.tap(&cell(0, 0))?;
    browser.keys(&format!("BM 4{}", enter_key()?))?;
    focused(browser, 0, BACK)
}

/// Types rows, each with one Enter after its reading and one after its distance.
fn key_rows(browser: &Browser, shots: &[Shot]) -> Result<()> {
    let enter = enter_key()?;
    for shot in shots {
        browser.keys(&format!("{}{enter}{}{enter}", shot.reading, shot.distance))?;
    }
    Ok(())
}

fn saved(browser: &Browser) -> Result<()> {
    browser.js("const { saved } = await import('./store.js'); await saved(); return 0;").map(drop)
}

fn digits(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = begin(stage)?;
    same(browser.js("return document.activeElement.inputMode")?, json!("decimal"))?;
    browser.js("globalThis.said = []; const heard = document.querySelector('#heard');
        new MutationObserver(() => said.push(heard.textContent)).observe(heard, { childList: true }); return 0;")?;
    let heard = |text: &str, column: usize| {
        let read = ask("book", &farstaff_tests::entry(&[("book", text), ("book.at", &column.to_string())]));
        read.and_then(|answer| answer.heard).ok_or("nothing is heard".to_owned())
    };
    for (text, words) in
        [("1234", "one two three four"), ("0,512", "zero five one two"), ("987 mm", "zero nine eight seven")]
    {
        browser.enter(&cell(0, BACK), text)?;
        let wanted = heard(&format!("BM 4\t{text}\t"), BACK)?;
        same(wanted.words.as_str(), words)?;
        browser.wait(&format!("document.querySelector('.heard b').textContent === {}", json!(wanted.words)))?;
        same(browser.text(".heard [data-x=label]")?, wanted.label.clone())?;
        browser.wait(&format!("document.querySelector('#heard').textContent.includes({})", json!(wanted.words)))?;
        std::thread::sleep(std::time::Duration::from_millis(SAID_AFTER));
        same(browser.js("return said.splice(0).length")?, json!(1))?;
        // No key jumps on by itself.
        focused(browser, 0, BACK)?;
    }
    // It stays in view beside the box, in letters that can be read at arm's length.
    let size = browser.js("const words = document.querySelector('.heard b'), box = words.getBoundingClientRect();
        return box.top > 0 && box.bottom < innerHeight && parseFloat(getComputedStyle(words).fontSize) >= 26;")?;
    same(size, json!(true))?;
    // Five digits may be four of which one came twice.
    browser.enter(&cell(0, BACK), "12334")?;
    browser.key(Key::Enter)?;
    browser.wait("document.querySelector('.open .wrongs p')")?;
    browser.tap(".open .wrongs button")?;
    browser.wait(&format!("document.querySelector({}).value.startsWith('1.2334')", json!(cell(0, BACK))))
}

fn names(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = begin(stage)?;
    let shots = shots();
    key_rows(browser, &shots[..5])?;
    focused(browser, 5, FORE)?;
    same(rows(browser)?, whole(&shots[..5]))?;
    // A name that is typed stays, and the count goes on from it.
    browser.enter(&cell(5, 0), "Weir 08")?;
    browser.enter(&cell(5, FORE), "1500")?;
    browser.key(Key::Enter)?;
    browser.keys(&format!("30{}", enter_key()?))?;
    focused(browser, 6, BACK)?;
    key_rows(browser, &shots[6..7])?;
    browser.keys("1700")?;
    let found: Vec<String> = rows(browser)?.iter().map(|cells| cells[0].clone()).collect();
    same(found[5..].to_vec(), ["Weir 08", "Weir 08", "Weir 09"].map(str::to_owned).to_vec())?;
    // The first row has the day, the others the time alone; what stands there is not written anew.
    let times = "const { record } = await import('./store.js');
        return record('question-book').entry.book.split('\\n').map((line) => line.split('\\t')[TIME])";
    let stamps = browser.js(&times.replace("TIME", &TIME.to_string()))?;
    let stamps: Vec<&str> = stamps.as_array().ok_or("no rows")?.iter().filter_map(|time| time.as_str()).collect();
    let shape = |text: &str| text.chars().map(|c| if c.is_ascii_digit() { '0' } else { c }).collect::<String>();
    same(shape(stamps[0]), "0000-00-00 00:00".to_owned())?;
    check(stamps[1..].iter().all(|text| shape(text) == "00:00"), || format!("{stamps:?}"))
}

fn undo(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = begin(stage)?;
    let shots = shots();
    key_rows(browser, &shots[..3])?;
    browser.keys("1")?;
    same(rows(browser)?.len(), 4)?;
    let near =
        browser.js("return document.querySelector('.open [data-travel=undo]').getBoundingClientRect().height")?;
    check(near.as_f64().is_some_and(|height| height >= 48.0), || format!("{near} px high"))?;
    browser.tap(".open [data-travel=undo]")?;
    browser.wait("document.querySelector('.open .no i').textContent === '4'")?;
    same(rows(browser)?, whole(&shots[..3]))?;
    browser.tap(".open [data-travel=redo]")?;
    browser.wait(&format!("document.querySelector({}).value === '1'", json!(cell(3, FORE))))?;
    let mut all = whole(&shots[..3]);
    all.push(typed(&shots[3], 1, 0));
    check(rows(browser)?[3][0] == all[3][0], || "the name did not come back".to_owned())
}

fn pause(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let server = begin(stage)?;
    let shots = shots();
    key_rows(browser, &shots[..31])?;
    focused(browser, 31, FORE)?;
    saved(browser)?;
    for (minutes, asks) in [(3, false), (23, true)] {
        let older = format!(
            "const change = db.transaction('records', 'readwrite'), all = change.objectStore('records');
            all.get('question-book').onsuccess = ({{ target }}) => {{
                all.put({{ ...target.result, when: Date.now() - {minutes} * 60000 }}); }};
            await new Promise((done, failed) => {{ change.oncomplete = done; change.onabort = failed; }});"
        );
        in_store(stage, &server, 1, &older)?;
        browser.go(&format!("{}#book", server.url()))?;
        stage.usable()?;
        browser.wait("document.querySelector('.open .no i').textContent === '32'")?;
        let text = browser.text(".open .ask p")?;
        check(text.contains(&format!("{minutes} minutes")), || text.clone())?;
        let box_of_it = "document.querySelector('.open .ask').getBoundingClientRect()";
        browser.wait(&format!("{box_of_it}.top > 0 && {box_of_it}.bottom < innerHeight"))?;
        same(browser.js("return document.querySelectorAll('.open .ask button').length > 1")?, json!(asks))?;
    }
    browser.tap(".open .ask button")?;
    browser.wait("document.activeElement.id === 'field-reread'")?;
    browser.wait("!document.querySelector('.ask p')?.checkVisibility()")
}

fn told(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = begin(stage)?;
    let shots = shots();
    key_rows(browser, &shots[..3])?;
    // Too near the foot of the staff: said at its row once it has been typed, and below it.
    let top = format!("return document.querySelector({}).getBoundingClientRect().top", json!(cell(3, FORE)));
    browser.keys("0")?;
    // The page has come to rest where the row opened.
    std::thread::sleep(std::time::Duration::from_millis(300));
    let before = browser.js(&top)?;
    browser.keys("123")?;
    std::thread::sleep(std::time::Duration::from_millis(300));
    same(browser.js(&top)?, before)?;
    same(browser.js("return document.querySelectorAll('.open .told').length")?, json!(0))?;
    browser.key(Key::Enter)?;
    browser.keys(&format!("31{}", enter_key()?))?;
    focused(browser, 4, BACK)?;
    let text = farstaff_tests::entry(&[("book", &whole_text(&rows(browser)?))]);
    let answer = ask("book", &text).ok_or("no such question")?;
    let said = answer.booked.first().map(|booked| booked.rows.clone()).unwrap_or_default();
    check(said.iter().any(|row| row.row == 3 && !row.cautions.is_empty()), || format!("{said:?}"))?;
    for row in said {
        let li = format!("document.querySelector('.row:nth-child({})')", row.row + 1);
        let texts: Vec<&str> = row.cautions.iter().map(|caution| caution.text.as_str()).collect();
        let shown = format!(
            "JSON.stringify([{li}.querySelector('.lead')?.textContent ?? '',
            [...{li}.querySelectorAll('.told')].map((each) => each.textContent)]) === {}",
            json!(json!([row.head, texts]).to_string())
        );
        browser.wait(&shown)?;
    }
    Ok(())
}

fn whole_text(rows: &[Vec<String>]) -> String {
    rows.iter().map(|cells| cells.join("\t") + "\t").collect::<Vec<_>>().join("\n")
}

fn thumb(stage: &Stage) -> Result<()> {
    let _server = begin(stage)?;
    let shots = shots();
    key_rows(stage.browser, &shots)?;
    finished(stage, &shots)
}

/// All is there, and the decision is what the native code says of it.
fn finished(stage: &Stage, shots: &[Shot]) -> Result<()> {
    focused(stage.browser, shots.len(), BACK)?;
    same(rows(stage.browser)?, whole(shots))?;
    stage.browser.js("document.activeElement.blur(); return 0;")?;
    stage.decides("book", &farstaff_tests::entry(&[("book", &whole_text(&whole(shots)))])).map(drop)
}

/// A number below `below`, the next of a row of numbers that is the same each time (Knuth's MMIX generator).
fn dice(state: &mut u64, below: usize) -> usize {
    *state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
    (*state >> 33) as usize % below
}

fn killed(stage: &Stage) -> Result<()> {
    let engine = stage.browser.engine();
    let profile = Rc::new(Scratch::new(&format!("{engine}-book"))?);
    let log = stage.out.join(format!("{engine}-book.log"));
    let server = stage.serve()?;
    let start = || -> Result<Browser> {
        let browser = engine.start_with(&log, &profile)?;
        browser.go(&format!("{}#book", server.url()))?;
        browser.wait("document.documentElement.dataset.ready")?;
        browser.viewport(360, 740)?;
        Ok(browser)
    };
    let mut browser = start()?;
    name_first(&browser)?;
    let (shots, mut state, mut done) = (shots(), SEED, 0);
    for kill in 0..KILLS {
        // Somewhere in the next tenth of the rows: so many characters of a reading are on disk, one more perhaps not.
        let at = done + 1 + dice(&mut state, 2 * SETUPS / KILLS - 2);
        key_rows(&browser, &shots[done..at])?;
        let on_disk = 1 + dice(&mut state, 3);
        browser.keys(&shots[at].reading[..on_disk])?;
        saved(&browser)?;
        browser.keys(&shots[at].reading[on_disk..=on_disk])?;
        browser.kill();
        browser = start()?;
        // Right after a crash a store may open late: the page says so, and brings the entry when it is there.
        browser.wait("(await import('./store.js')).record('question-book').entry.book")?;
        let found = rows(&browser)?;
        let with = |characters: usize| {
            let mut all = whole(&shots[..at]);
            all.push(typed(&shots[at], characters, 0));
            all
        };
        check(found == with(on_disk) || found == with(on_disk + 1), || format!("kill {kill}: {found:?}"))?;
        // It stands where it was.
        same(browser.text(".open .no i")?, (at + 1).to_string())?;
        browser.enter(&cell(at, shots[at].column), &shots[at].reading)?;
        browser.keys(&format!("{0}{1}{0}", enter_key()?, shots[at].distance))?;
        done = at + 1;
    }
    key_rows(&browser, &shots[done..])?;
    finished(&Stage { browser: &browser, sources: stage.sources, out: stage.out.clone() }, &shots)
}
