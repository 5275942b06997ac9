//! Pictures of the page for people to look at, and the printed sheet.

use crate::{ASKED, Stage, WRONG};
use farstaff_tests::engine::Engine;
use farstaff_tests::steps::{Tally, check};
use farstaff_tests::{Result, words};
use std::process::Command;

/// Phones and a desk; of the other engines a phone is enough.
const SIZES: [(u32, u32); 3] = [(360, 740), (412, 915), (1280, 900)];

pub fn run(tally: &mut Tally, stage: &Stage) {
    // WebKit's driver does not print.
    if stage.browser.engine() != Engine::WebKit {
        tally.step("the printed sheet holds entry, decision, working and sources", || paper(stage));
    }
    tally.step("pictures are taken", || pictures(stage));
}

fn pictures(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let engine = browser.engine();
    let places = [
        ("home", String::new()),
        ("sight", format!("#sight?{ASKED}")),
        ("errors", format!("#sight?{WRONG}")),
        ("reading", "#reading?reading=1.842+m&distance=240+m&applied=raw".to_owned()),
    ];
    for (name, place) in &places {
        let _server = stage.open_at(place)?;
        let sizes = if engine == Engine::Chromium { &SIZES[..] } else { &SIZES[..1] };
        for &(width, height) in sizes {
            browser.viewport(width, height)?;
            for theme in ["light", "sun", "night"] {
                browser.js(&format!("document.querySelector('[name=theme][value={theme}]').click(); return 0;"))?;
                browser.js("await new Promise(requestAnimationFrame); scrollTo(0, 0); return 0;")?;
                browser.screenshot(&stage.out.join(format!("{engine}-{name}-{width}-{theme}.png")))?;
            }
        }
        browser.viewport(412, 915)?;
        browser.js("document.querySelector('[name=theme][value=light]').click(); return 0;")?;
        browser.js("for (const each of document.querySelectorAll('#question details')) each.open = true; return 0;")?;
        browser.screenshot_whole(&stage.out.join(format!("{engine}-{name}-whole.png")))?;
    }
    Ok(())
}

fn paper(stage: &Stage) -> Result<()> {
    let engine = stage.browser.engine();
    for (id, entry) in [("sight", ASKED), ("reading", "reading=1.842+m&distance=240+m&applied=raw")] {
        let _server = stage.open_at(&format!("#{id}?{entry}"))?;
        let answer = stage.decides(id, entry)?;
        let file = stage.out.join(format!("{engine}-{id}.pdf"));
        stage.browser.print(&file)?;
        let read = Command::new("pdftotext").arg("-layout").arg(&file).arg("-").output().map_err(words)?;
        let text = plain(&String::from_utf8_lossy(&read.stdout));
        let mut wanted = vec![answer.verdict.word.to_owned(), answer.verdict.number.clone()];
        wanted.extend(answer.working.first().cloned());
        wanted.extend(answer.results.iter().map(|result| result.label.to_owned()));
        for line in wanted {
            // A line may be broken anywhere: word by word, then.
            let missing = line.split_whitespace().find(|word| !text.contains(&plain(word)));
            check(missing.is_none(), || format!("{id}: no {missing:?} of {line:?} in {text:.600}"))?;
        }
        let pages = stage.out.join(format!("{engine}-{id}-page"));
        let drawn =
            Command::new("pdftoppm").args(["-png", "-r", "80"]).arg(&file).arg(&pages).status().map_err(words)?;
        check(drawn.success(), || "pdftoppm fails".to_owned())?;
    }
    Ok(())
}

/// Without what a PDF may set in other ways.
fn plain(text: &str) -> String {
    text.chars().filter(|letter| letter.is_alphanumeric() || letter.is_whitespace()).collect()
}
