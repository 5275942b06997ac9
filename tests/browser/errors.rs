//! What is wrong is said in the same words at the field and in the summary, and what was typed stays.

use crate::Stage;
use farstaff::question::{Kind, ask, catalogue};
use farstaff_tests::Result;
use farstaff_tests::engine::Key;
use farstaff_tests::steps::{Tally, check, same};
use serde_json::{Value, json};

/// What nobody could read, as people come to type it, and what is beyond any range in any unit.
const BAD: [&str; 10] = ["far", "-", "1,2,3", "1e999", "0x10", "NaN", "3 bananas", "<b>5</b>", "1e9", "-1e9"];

/// What stands at the field and in the summary.
const SHOWN: &str = "const at = (css) => [...document.querySelectorAll(css)].filter((each) => each.checkVisibility())
    .map((each) => each.textContent);
    return { field: at('.error:not([hidden]) > p'), summary: at('#problems li a'),
        marked: [...document.querySelectorAll('[aria-invalid=true]')].map((each) => each.name) };";

pub fn run(tally: &mut Tally, stage: &Stage) {
    tally.step("an error is said at the field and in the summary, what was typed stays", || garbage(stage));
    tally.step("what is missing is asked for at the end, not before", || missing(stage));
    tally.step("any bad text in any field is answered in words", || every_field(stage));
    tally.step("a fix is one tap", || fix(stage));
}

fn message(id: &str, entry: &str, field: &str) -> Result<String> {
    let answer = ask(id, entry).ok_or("no such question")?;
    let problem = answer.problems.iter().find(|problem| problem.field == field);
    Ok(problem.ok_or(format!("{entry} has no problem with {field}"))?.message.clone())
}

fn garbage(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = stage.open_at("#sight?tolerance=3+mm")?;
    browser.tap("#field-distance")?;
    browser.keys("abc")?;
    // Nothing is wrong yet with what is being typed.
    same(browser.js(SHOWN)?["field"].clone(), json!([]))?;
    browser.key(Key::Enter)?;
    let wanted = message("sight", "distance=abc", "distance")?;
    browser.wait("document.querySelector('.error:not([hidden])')")?;
    same(browser.js(SHOWN)?, json!({ "field": [wanted], "summary": [wanted], "marked": ["distance"] }))?;
    same(browser.js("return document.querySelector('#field-distance').value")?, json!("abc"))?;
    let described = "const box = document.querySelector('#field-distance'); \
        return box.getAttribute('aria-describedby').split(' ').map((id) => document.getElementById(id).textContent).join(' ')";
    let described = browser.js(described)?;
    check(described.as_str().is_some_and(|text| text.contains(&wanted)), || format!("read out: {described}"))?;
    browser.tap("#problems li a")?;
    browser.wait("document.activeElement.name === 'distance'")?;
    browser.enter("#field-distance", "60")?;
    browser.key(Key::Enter)?;
    browser.wait("!document.querySelector('.error:not([hidden])')")?;
    same(browser.js(SHOWN)?, json!({ "field": [], "summary": [], "marked": [] }))
}

fn missing(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = stage.open_at("#sight")?;
    same(browser.js(SHOWN)?["summary"].clone(), json!([]))?;
    browser.tap("#field-distance")?;
    browser.keys("60")?;
    // On to the end, past everything else.
    for _ in 0..12 {
        browser.key(Key::Enter)?;
        if browser.js("return document.activeElement.id")? == json!("problems") {
            break;
        }
    }
    let wanted = message("sight", "distance=60", "tolerance")?;
    same(browser.js(SHOWN)?, json!({ "field": [wanted], "summary": [wanted], "marked": ["tolerance"] }))?;
    same(browser.js("return document.activeElement.id")?, json!("problems"))
}

/// Types a text into a field and leaves it, then says what is shown and what stands in the field.
const VISIT: &str = "const wrong = [];
    for (const [id, field, text, wanted, choice] of ROWS) {
        if (location.hash.slice(1) !== id) {
            location.hash = id;
            await new Promise((done) => addEventListener('hashchange', () => setTimeout(done), { once: true }));
        }
        if (choice) {
            const [name, value] = choice;
            const key = [...document.getElementsByName(name)].find((each) => each.value === value && each.type === 'radio');
            const list = document.getElementById(`field-${name}`);
            if (key) key.click();
            else {
                list.value = value;
                list.dispatchEvent(new Event('change', { bubbles: true }));
            }
        }
        const at = document.getElementById(`field-${field}`);
        const type = (typed) => {
            at.value = typed;
            for (const event of ['input', 'focusout']) at.dispatchEvent(new Event(event, { bubbles: true }));
        };
        type(text);
        await new Promise((done) => setTimeout(done));
        const here = at.closest('.field').querySelector('.error:not([hidden]) p')?.textContent;
        const summary = [...document.querySelectorAll('#problems li a')].map((each) => each.textContent);
        const words = document.getElementById('word').textContent;
        if (here !== wanted || !summary.includes(wanted) || at.value !== text || !words || !at.checkVisibility())
            wrong.push({ id, field, text, wanted, here, summary, stays: at.value });
        type('');
    }
    return wrong;";

fn every_field(stage: &Stage) -> Result<()> {
    let mut rows = vec![];
    for question in catalogue().questions {
        for field in question.fields {
            let Kind::Number { .. } = field.kind else { continue };
            for text in BAD {
                // A field that hangs on a choice is there once that is made.
                let choice = field.when.map(|when| (when.field, when.values[0]));
                let mut entry = vec![(field.name, text)];
                entry.extend(choice);
                let found = message(question.id, &farstaff_tests::entry(&entry), field.name)?;
                rows.push(json!([question.id, field.name, text, found, choice]));
            }
        }
    }
    check(rows.len() > 100, || "hardly any field".to_owned())?;
    let _server = stage.open()?;
    let wrong = stage.browser.js(&VISIT.replace("ROWS", &Value::from(rows).to_string()))?;
    check(wrong == json!([]), || format!("{:.1500}", wrong.to_string()))
}

fn fix(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = stage.open_at("#sight?distance=60+m&tolerance=3+mm")?;
    // Typed as k, it looks like m.
    browser.js("document.querySelector('#field-k').closest('details').open = true; return 0;")?;
    browser.tap("#field-k")?;
    browser.keys("0.07")?;
    browser.key(Key::Enter)?;
    browser.wait("document.querySelector('.ask:not([hidden])')?.checkVisibility()")?;
    browser.tap(".ask:not([hidden]) button")?;
    browser.wait("document.querySelector('[name=\"k.unit\"]').value === 'm'")?;
    browser.wait("!document.querySelector('.ask:not([hidden])')")?;
    stage.decides("sight", "distance=60+m&tolerance=3+mm&k=0.07&k.unit=m").map(drop)
}
