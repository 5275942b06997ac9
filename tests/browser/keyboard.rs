//! Everything works by keyboard alone, and where the keyboard is can be seen.

use crate::{ASKED, Stage};
use farstaff_tests::Result;
use farstaff_tests::engine::Key;
use farstaff_tests::steps::{Tally, check, same};
use serde_json::json;

pub fn run(tally: &mut Tally, stage: &Stage) {
    tally.step("the main decision is made by keyboard alone", || decide(stage));
    tally.step("every stop of the keyboard is seen, and none is left out", || stops(stage));
}

fn decide(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = stage.open()?;
    let at = |css: &str| -> Result<bool> {
        let here = browser.js(&format!("return document.activeElement.matches({})", json!(css)))?;
        Ok(here == json!(true))
    };
    for _ in 0..10 {
        browser.key(Key::Tab)?;
        if at("#questions a[href='#sight']")? {
            break;
        }
    }
    browser.key(Key::Enter)?;
    browser.wait("document.activeElement.name === 'distance'")?;
    browser.keys("60")?;
    browser.key(Key::Enter)?;
    browser.wait("document.activeElement.name === 'tolerance'")?;
    browser.keys("3")?;
    browser.key(Key::Enter)?;
    browser.wait("document.activeElement.name === 'line_height'")?;
    browser.keys("0.5")?;
    browser.key(Key::Enter)?;
    browser.wait("document.activeElement.name === 'sky'")?;
    // The last one is chosen by default, the first is wanted. Not every engine goes round.
    for _ in 0..3 {
        browser.key(Key::Up)?;
        if at("[value=sunny]")? {
            break;
        }
    }
    for _ in 0..10 {
        browser.key(Key::Enter)?;
        if at("#verdict")? {
            break;
        }
    }
    check(at("#verdict")?, || "Enter does not lead to the decision".to_owned())?;
    stage.decides("sight", "distance=60&tolerance=3&line_height=0.5&sky=sunny").map(drop)
}

/// What the stop is, whether it shows that it is one, and whether something lies over its middle.
const STOP: &str = "const at = document.activeElement;
    if (at === document.body || at === document.documentElement || !document.hasFocus()) return null;
    const shown = at.closest('.choice') ?? at;
    for (const _ of [1, 2]) await new Promise(requestAnimationFrame);
    const box = shown.getBoundingClientRect();
    const over = document.elementFromPoint(box.left + box.width / 2, box.top + Math.min(box.height, innerHeight) / 2);
    const { outlineStyle, outlineWidth } = getComputedStyle(shown);
    at.dataset.stop = '1';
    return { what: `${at.tagName} ${at.id || at.name || at.textContent.trim()}`, again: at.dataset.seen === '1',
        marked: outlineStyle !== 'none' && parseFloat(outlineWidth) > 0,
        free: Boolean(over) && (shown.contains(over) || over.contains(shown)),
        seen: (at.dataset.seen = '1') };";

/// Everything that can be worked and where the keyboard has not been; of radios one in each group.
const LEFT_OUT: &str = "const all = 'a[href], button, input, select, textarea, summary, [tabindex=\"0\"]';
    const radios = new Set([...document.querySelectorAll('[type=radio][data-seen]')].map((each) => each.name));
    return [...document.querySelectorAll(all)].filter((each) => each.checkVisibility() && !each.disabled
        && !each.dataset.seen && !(each.type === 'radio' && radios.has(each.name)))
        .map((each) => `${each.tagName} ${each.id || each.name || each.textContent.trim()}`);";

fn stops(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    browser.viewport(412, 915)?;
    for place in ["", &format!("#sight?{ASKED}")] {
        let _server = stage.open_at(place)?;
        browser.js("for (const each of document.querySelectorAll('details')) each.open = true; return 0;")?;
        let mut count = 0;
        loop {
            browser.key(Key::Tab)?;
            let stop = browser.js(STOP)?;
            if stop.is_null() || stop["again"] == json!(true) {
                break;
            }
            count += 1;
            check(stop["marked"] == json!(true), || format!("not seen at {place:?}: {}", stop["what"]))?;
            check(stop["free"] == json!(true), || format!("covered at {place:?}: {}", stop["what"]))?;
            check(count < 300, || "it goes on for ever".to_owned())?;
        }
        check(count > 3, || format!("{count} stops at {place:?}"))?;
        same(browser.js(LEFT_OUT)?, json!([]))?;
    }
    Ok(())
}
