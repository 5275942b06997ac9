//! The main decision, as it is made on site: a phone's screen, few taps, nothing remembered.

use crate::{ASKED, Stage, WRONG};
use farstaff_tests::Result;
use farstaff_tests::engine::Engine;
use farstaff_tests::steps::{Tally, check, same};
use serde_json::json;

const TAPS_AT_MOST: u64 = 4;
const QUESTION: &str = "#questions a[href='#sight']";
/// Counts what the browser itself holds for fingers and mouse keys, whoever moved them.
const COUNT: &str =
    "globalThis.taps = 0; addEventListener('pointerdown', (e) => { taps += e.isTrusted }, true); return 0;";

pub fn run(tally: &mut Tally, stage: &Stage) {
    tally.step("the main decision takes four taps from cold", || four_taps(stage));
    tally.step("a decimal comma is read and stays", || comma(stage));
    tally.step("undo takes back what was typed, redo brings it again", || undo(stage));
    tally.step("the unit beside a box is the one its number is read in", || units(stage));
    tally.step("nothing runs off a narrow screen", || narrow(stage));
    tally.step("the theme chosen is there again", || theme(stage));
}

/// Opens the question by a tap and types the distance: the box is ready for it.
fn begin(stage: &Stage, distance: &str) -> Result<()> {
    stage.browser.tap(QUESTION)?;
    stage.browser.wait("document.activeElement.name === 'distance'")?;
    stage.browser.keys(distance)
}

fn four_taps(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    browser.viewport(360, 740)?;
    let _server = stage.open()?;
    browser.js(COUNT)?;
    begin(stage, "60")?;
    browser.tap("#field-tolerance")?;
    browser.keys("3")?;
    browser.tap("#field-line_height")?;
    browser.keys("0.5")?;
    browser.tap("label:has([name=sky][value=sunny])")?;
    let answer = stage.decides("sight", "distance=60&tolerance=3&line_height=0.5&sky=sunny")?;
    check(!answer.verdict.word.is_empty(), || "no decision".to_owned())?;
    let taps = browser.js("return taps")?.as_u64().ok_or("not counted")?;
    check((1..=TAPS_AT_MOST).contains(&taps), || format!("{taps} taps"))?;
    // The decision is on the screen without another move of the hand.
    let seen = "const box = document.querySelector('#verdict').getBoundingClientRect(); \
        return box.top >= 0 && box.bottom <= innerHeight && box.height > 0;";
    same(browser.js(seen)?, json!(true))
}

fn comma(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = stage.open()?;
    begin(stage, "62,5")?;
    browser.tap("#field-tolerance")?;
    browser.keys("2,5")?;
    let comma = stage.decides("sight", "distance=62,5&tolerance=2,5")?;
    let point = stage.decides("sight", "distance=62.5&tolerance=2.5")?;
    same(comma.verdict, point.verdict)?;
    browser.tap("#field-line_height")?;
    same(browser.js("return document.querySelector('#field-distance').value")?, json!("62,5"))
}

fn undo(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = stage.open()?;
    let distance = "document.querySelector('#field-distance').value";
    begin(stage, "60")?;
    browser.tap("#field-tolerance")?;
    browser.keys("3")?;
    browser.enter("#field-distance", "95")?;
    browser.tap("#undo")?;
    browser.wait(&format!("{distance} === '60'"))?;
    stage.decides("sight", "distance=60&tolerance=3")?;
    browser.tap("#redo")?;
    browser.wait(&format!("{distance} === '95'"))?;
    stage.decides("sight", "distance=95&tolerance=3").map(drop)
}

/// For every choice of units and every number: type a bare 1, compare what the list beside the box shows with what the
/// calculator says it read.
fn units(stage: &Stage) -> Result<()> {
    let _server = stage.open()?;
    let wrong = stage.browser.js(
        "const { ask, catalogue } = await import('./core.js');
        const all = catalogue();
        const wrong = [];
        const settled = () => new Promise((done) => setTimeout(done, 20));
        for (const question of all.questions) {
            const choice = question.fields.find((field) => field.name === all.units_field);
            for (const { value } of choice?.kind.options ?? []) {
                location.hash = `#${question.id}?${all.units_field}=${value}`;
                await settled();
                for (const field of question.fields.filter((field) => field.kind.type === 'number')) {
                    const read = ask(question.id, { [all.units_field]: value, [field.name]: field.kind.min > 1 ? '6371' : '1' })
                        .read.find((read) => read.field === field.name);
                    const shown = document.querySelector(`select[name='${field.name}.unit']`)?.value;
                    if (read && read.unit !== shown) wrong.push([question.id, value, field.name, shown, read.unit]);
                }
            }
        }
        return wrong;",
    )?;
    same(wrong, json!([]))
}

/// What sticks out to the right, apart from what scrolls in a box of its own.
const OUTSIDE: &str = "const wide = document.documentElement.scrollWidth; const out = [];
    for (const each of document.body.querySelectorAll('*')) {
        const { right, width, height } = each.getBoundingClientRect();
        const own = each.closest('.scroll, .unseen, svg svg, .skip');
        if (width && height && right > innerWidth + 0.5 && !own) out.push(`${each.tagName}#${each.id}.${each.className}`);
    }
    return [wide > innerWidth ? `the page is ${wide} wide` : null, ...out.slice(0, 5)].filter(Boolean);";

fn narrow(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    for width in [320, 360] {
        let got = browser.viewport(width, 740)?;
        // WebKit's window does not go below 447.
        check(got == u64::from(width) || browser.engine() == Engine::WebKit, || format!("{got} wide"))?;
        for place in ["", &format!("#sight?{ASKED}"), &format!("#sight?{WRONG}"), "#reading?reading=1.5&distance=300"] {
            let _server = stage.open_at(place)?;
            browser.js("for (const each of document.querySelectorAll('details')) each.open = true; return 0;")?;
            for theme in ["light", "sun", "night"] {
                browser.js(&format!("document.querySelector('[name=theme][value={theme}]').click(); return 0;"))?;
                let found = browser.js(OUTSIDE)?;
                check(found == json!([]), || format!("{got} wide, {theme}, {place:?}: {found}"))?;
            }
        }
    }
    browser.viewport(412, 915).map(drop)
}

fn theme(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = stage.open()?;
    browser.tap("#settings summary")?;
    browser.tap("label:has([name=theme][value=night])")?;
    let paper = "return getComputedStyle(document.body).backgroundColor";
    let night = browser.js(paper)?;
    browser.reload()?;
    stage.usable()?;
    same(browser.js(paper)?, night)?;
    check(browser.js(paper)? != json!("rgb(255, 255, 255)"), || "night is white".to_owned())
}
