//! What was entered stays: over a closed tab, a killed browser, a full disk, a damaged store or link.

use crate::{ASKED, Stage};
use farstaff_tests::child::Scratch;
use farstaff_tests::engine::Engine;
use farstaff_tests::steps::{Tally, check, same};
use farstaff_tests::{Result, words};
use farstaff_www::serve::Server;
use serde_json::json;
use std::rc::Rc;

const ASIDE: &str = "document.querySelector('#kept-aside').checkVisibility()";

pub fn run(tally: &mut Tally, stage: &Stage) {
    tally.step("the last entry survives a closed tab", || closed_tab(stage));
    // Under its driver WebKit keeps nothing on disk.
    if stage.browser.engine() != Engine::WebKit {
        tally.step("the last entry survives a killed browser", || killed(stage));
    }
    tally.step("a calculator that was stopped starts anew with the entry", || stopped(stage));
    tally.step("a full disk is reported, and the page still answers", || full(stage));
    tally.step("a damaged record is kept aside, and the page opens", || record(stage));
    tally.step("a damaged link is kept aside, and the page opens", || link(stage));
    tally.step("an entry by link does not replace one's own unasked", || beside(stage));
    tally.step("a store that cannot be opened is reported, and the page answers", || store(stage));
}

/// Types a distance over the one that stands there.
fn type_distance(stage: &Stage, distance: &str) -> Result<()> {
    stage.browser.wait("document.querySelector('#field-distance')")?;
    stage.browser.enter("#field-distance", distance)
}

fn closed_tab(stage: &Stage) -> Result<()> {
    let server = stage.open_at("#sight?tolerance=3+mm")?;
    // Closed at once, as a finger does; no grace for what is being written.
    type_distance(stage, "73.25")?;
    stage.browser.next_tab()?;
    stage.browser.go(&format!("{}#sight", server.url()))?;
    stage.usable()?;
    stage.decides("sight", "distance=73.25&tolerance=3").map(drop)
}

fn killed(stage: &Stage) -> Result<()> {
    let engine = stage.browser.engine();
    let profile = Rc::new(Scratch::new(&format!("{engine}-killed"))?);
    let log = stage.out.join(format!("{engine}-killed.log"));
    let server = stage.serve()?;
    let browser = engine.start_with(&log, &profile)?;
    let own = Stage { browser: &browser, sources: stage.sources, out: stage.out.clone() };
    browser.go(&format!("{}#sight?tolerance=3+mm", server.url()))?;
    own.usable()?;
    type_distance(&own, "81.5")?;
    // What the page calls saved has to be on disk: the kill follows at once.
    browser.js("const { saved } = await import('./store.js'); await saved(); return 0;")?;
    browser.kill();
    let browser = engine.start_with(&log, &profile)?;
    let own = Stage { browser: &browser, sources: stage.sources, out: stage.out.clone() };
    browser.go(&format!("{}#sight", server.url()))?;
    own.usable()?;
    own.decides("sight", "distance=81.5&tolerance=3").map(drop)
}

/// Spoils the calculator's memory, as a browser's fault would.
fn stopped(stage: &Stage) -> Result<()> {
    let _server = stage.open_at("#sight?tolerance=3+mm")?;
    stage.browser.js("const core = await import('./core.js'); const { memory } = await core.default();
        new Uint8Array(memory.buffer).fill(255); document.documentElement.dataset.spoilt = '1'; return 0;")?;
    // One key: the page is away before a second.
    type_distance(stage, "9")?;
    stage.browser.wait("!document.documentElement.dataset.spoilt && document.documentElement.dataset.ready")?;
    stage.decides("sight", "distance=9&tolerance=3").map(drop)
}

fn full(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let server = stage.serve()?;
    let chromium = browser.engine() == Engine::Chromium;
    if chromium {
        // Before the first write: afterwards Chromium relies for a while on the room it found.
        let params = json!({ "origin": server.url(), "quotaSize": 1 });
        browser.cdp("Storage.overrideQuotaForOrigin", params)?;
    }
    browser.go(&format!("{}#sight", server.url()))?;
    stage.usable()?;
    if !chromium {
        // No other driver can make a disk full; this is how it looks to the page.
        browser.js(
            "const begin = IDBDatabase.prototype.transaction; IDBDatabase.prototype.transaction = function (on, mode, how) {
                if (mode === 'readwrite') throw new DOMException('full', 'QuotaExceededError');
                return begin.call(this, on, mode, how); }; return 0;",
        )?;
    }
    type_distance(stage, "64")?;
    browser.enter("#field-tolerance", "3")?;
    browser.wait("document.querySelector('#messages').innerText.includes('full')")?;
    stage.decides("sight", "distance=64&tolerance=3").map(drop)
}

/// Works on the page's own store, from a file of the same origin that runs no script of the page.
pub fn in_store(stage: &Stage, server: &Server, version: u32, body: &str) -> Result<()> {
    stage.browser.go(&format!("{}icon.svg", server.url()))?;
    stage.browser.js(&format!(
        "const request = indexedDB.open('farstaff', {version}); let made = false;
        request.onupgradeneeded = () => {{ made = true; }};
        const db = await new Promise((done, failed) => {{
            request.onsuccess = () => done(request.result); request.onerror = () => failed(request.error); }});
        {body}
        db.close(); return 0;"
    ))?;
    Ok(())
}

/// Waits until a message says so.
fn said(stage: &Stage, word: &str) -> Result<()> {
    stage.browser.wait(&format!("document.querySelector('#messages').textContent.includes('{word}')"))
}

fn record(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let server = stage.open_at(&format!("#sight?{ASKED}"))?;
    browser.js("const { saved } = await import('./store.js'); await saved(); return 0;")?;
    let spoil = "const change = db.transaction('records', 'readwrite');
        change.objectStore('records').put({ id: 'question-sight', form: 1, rev: 'x', entry: { distance: 'Kilkenny' } });
        await new Promise((done, failed) => { change.oncomplete = done; change.onabort = failed; });";
    in_store(stage, &server, 1, spoil)?;
    browser.go(&format!("{}#sight", server.url()))?;
    stage.usable()?;
    browser.wait(ASIDE)?;
    said(stage, "damaged")?;
    // It opens and answers; what the site keeps was not damaged.
    type_distance(stage, "60")?;
    stage.decides("sight", ASKED)?;
    for _ in 0..2 {
        let text = browser.js("return document.querySelector('#aside-text').value")?;
        check(text.as_str().is_some_and(|text| text.contains("Kilkenny")), || format!("kept: {text}"))?;
        browser.js("const { saved } = await import('./store.js'); await saved(); return 0;")?;
        browser.reload()?;
        stage.usable()?;
        browser.wait(ASIDE)?;
    }
    browser.tap("#aside-drop")?;
    browser.wait(&format!("!{ASIDE}"))?;
    browser.js("const { saved } = await import('./store.js'); await saved(); return 0;")?;
    browser.reload()?;
    stage.usable()?;
    same(browser.js(&format!("return {ASIDE}"))?, json!(false))
}

fn link(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    for (place, kept, entry) in [
        ("#sight?distance=60+m&tolerance=3+mm&sky=purple&weight=5", "sky=purple", "distance=60&tolerance=3"),
        ("#sight?distance=60+m&distance=9+m&tolerance=3+mm", "distance=9 m", "distance=60&tolerance=3"),
        ("#sight?distance=60+m&tolerance=3+mm&%ff%fe=%zz", "%zz", "distance=60&tolerance=3"),
    ] {
        let _server = stage.open_at(place)?;
        browser.wait(ASIDE)?;
        let text = browser.js("return document.querySelector('#aside-text').value")?;
        check(text.as_str().is_some_and(|text| text.contains(kept)), || format!("{place}: kept {text}"))?;
        said(stage, "link")?;
        stage.decides("sight", entry)?;
    }
    let _server = stage.open_at("#no_such_question?distance=60")?;
    browser.wait(ASIDE)?;
    said(stage, "no question")?;
    browser.tap("#questions a")?;
    browser.wait("document.querySelector('#field-distance')")
}

fn beside(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let server = stage.open_at(&format!("#sight?{ASKED}"))?;
    browser.js("const { saved } = await import('./store.js'); await saved(); return 0;")?;
    browser.go(&format!("{}icon.svg", server.url()))?;
    browser.go(&format!("{}#sight?distance=90+m&tolerance=1+mm", server.url()))?;
    stage.usable()?;
    stage.decides("sight", "distance=90&tolerance=1")?;
    browser.tap("#messages button")?;
    stage.decides("sight", ASKED).map(drop)
}

/// A store of a later version of the page, and one without what it should hold.
fn store(stage: &Stage) -> Result<()> {
    for (version, body) in [(99, ""), (1, "check(made);")] {
        let server = stage.serve()?;
        let body = body.replace("check(made);", "if (!made) throw new Error('there was a store already');");
        in_store(stage, &server, version, &body)?;
        stage.browser.go(&format!("{}#sight?{ASKED}", server.url()))?;
        stage.usable()?;
        let said = stage.browser.text("#messages")?;
        check(!said.trim().is_empty(), || format!("nothing is said of version {version}"))?;
        stage.decides("sight", ASKED).map_err(words)?;
    }
    Ok(())
}
