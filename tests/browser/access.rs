//! An audit of the page by axe-core, in every theme, on narrow screens, with everything open and with errors.

use crate::{ASKED, Stage, WRONG};
use farstaff_tests::steps::{Tally, check};
use farstaff_tests::{Result, words};
use serde_json::{Value, json};

/// Contrast 7:1 and the size of targets are not in the default set.
const AUDIT: &str = "const { violations } = await axe.run(document, { resultTypes: ['violations'], rules: {
        'target-size': { enabled: true }, 'color-contrast-enhanced': { enabled: true } } });
    return violations.map(({ id, help, nodes }) => [id, help, nodes.slice(0, 3).map((node) => node.html.slice(0, 150))]);";

pub fn run(tally: &mut Tally, stage: &Stage) {
    let Some(axe) = tally.step("axe-core is there", axe) else { return };
    for theme in ["light", "sun", "night"] {
        tally.step(&format!("axe finds nothing, {theme}"), || audit(stage, &axe, theme));
    }
    tally.step("axe finds what is wrong", || wrong(stage, &axe));
}

fn axe() -> Result<String> {
    let file = farstaff_tests::npm_modules()?.join("axe-core/axe.min.js");
    std::fs::read_to_string(&file).map_err(|error| format!("{}: {error}; tests/run installs it", file.display()))
}

fn found(stage: &Stage, axe: &str) -> Result<Value> {
    stage.browser.js(&format!("if (!globalThis.axe) {{ {axe} }} {AUDIT}"))
}

fn audit(stage: &Stage, axe: &str, theme: &str) -> Result<()> {
    let browser = stage.browser;
    for width in [320, 412] {
        browser.viewport(width, 915)?;
        for place in [
            "",
            &format!("#sight?{ASKED}"),
            &format!("#sight?{WRONG}"),
            "#reading?reading=1.5&distance=300",
            // A table: the row to come is open, with its boxes; one that was booked is wrong; positions are asked.
            "#clearance?positions=latlon&ground_a=1&profile=abc%09%09%09",
            "#clearance?ground_a=1&ground_b=1&distance=5+km&profile=2+km%090%09%0A3+km%091%09",
        ] {
            let _server = stage.open_at(place)?;
            browser.js(&format!(
                "for (const each of document.querySelectorAll('details')) each.open = true;
                document.querySelector('[name=theme][value={theme}]').click(); return 0;"
            ))?;
            let found = found(stage, axe)?;
            check(found == json!([]), || format!("at {width}, {place:?}: {:.1500}", found.to_string()))?;
        }
    }
    Ok(())
}

/// An audit that finds nothing may have looked at nothing.
fn wrong(stage: &Stage, axe: &str) -> Result<()> {
    let _server = stage.open()?;
    stage.browser.js(
        "document.querySelector('.promise').style.color = '#767676';
        for (const each of document.querySelectorAll('button')) each.style.cssText = 'min-height: 0; height: 5px; width: 5px; padding: 0';
        document.documentElement.removeAttribute('lang'); return 0;",
    )?;
    let found = found(stage, axe)?;
    let rules: Vec<&str> = found.as_array().ok_or("no list")?.iter().filter_map(|rule| rule[0].as_str()).collect();
    check(["color-contrast-enhanced", "html-has-lang"].iter().all(|rule| rules.contains(rule)), || {
        words(format!("{rules:?}"))
    })
}
