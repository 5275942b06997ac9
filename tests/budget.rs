//! What everything weighs and how long it takes, beside what it may: `cargo bench -p farstaff-tests`. Sizes gate the tests
//! (site.rs); times depend on the machine and on what else it does, so they are printed and judged by people.

use farstaff::question::ask;
use farstaff_tests::engine::{Browser, Engine};
use farstaff_tests::{Result, words};
use farstaff_www::serve::Server;
use farstaff_www::{budget, site::Site};
use serde_json::{Value, json};
use std::time::Instant;

const ENTRY: &str = "distance=60+m&tolerance=3+mm&line_height=1.2+m&sky=sunny&other_distance=50+m&collimation=0.03";
const ROUNDS: usize = 7;
/// Slow 4G: 1.6 Mbit/s, 150 ms.
const BYTES_PER_SECOND: u32 = 200_000;
const LATENCY_MS: u32 = 150;

/// Notes when the page has said that it can be used and the next picture is drawn; time runs from the tap on the link.
const WATCH: &str = "new MutationObserver((_, watch) => {
    if (!document.documentElement?.dataset.ready) return;
    watch.disconnect();
    requestAnimationFrame(() => setTimeout(() => { globalThis.readyAt = performance.now(); }));
}).observe(document, { attributes: true, subtree: true, attributeFilter: ['data-ready'] });";

/// Types digit after digit; each time is from the key to the page laid out anew.
const TYPE: &str = "const box = document.querySelector('#field-distance');
    const times = [];
    for (let i = 0; i < 60; i += 1) {
        await new Promise((done) => requestAnimationFrame(() => setTimeout(done)));
        const start = performance.now();
        box.value = String(40 + i);
        box.dispatchEvent(new Event('input', { bubbles: true }));
        document.body.getBoundingClientRect();
        times.push(performance.now() - start);
    }
    return times.slice(10);";

fn main() -> Result<()> {
    let site = farstaff_www::build().map_err(words)?;
    print!("{}", budget::report(&site).0);
    println!("\n{:<56}{:>9}  budget", "time, ms", "median");
    row("answer to a keystroke, native", &native(), 5.0);
    let log = farstaff_www::target_dir().map_err(words)?.join("budget.log");
    let browser = Engine::Chromium.start(&log)?;
    browser.viewport(412, 915)?;
    browser.cdp("Page.addScriptToEvaluateOnNewDocument", json!({ "source": WATCH }))?;
    row("answer to a keystroke and the page laid out, Chromium", &typed(&browser, &site, 1)?, 5.0);
    row("the same at 6× CPU throttle", &typed(&browser, &site, 6)?, 16.0);
    row("a reading's digit in a book of 500 setups, Chromium", &booked(&browser, &site, 1)?, 5.0);
    row("the same at 6× CPU throttle", &booked(&browser, &site, 6)?, 16.0);
    row("first visit usable, slow 4G, 4× CPU throttle", &cold(&browser, &site)?, 1500.0);
    row("start without signal, 6× CPU throttle", &warm(&browser, &site)?, 500.0);
    Ok(())
}

fn row(name: &str, times: &[f64], most: f64) {
    let mut sorted = times.to_vec();
    sorted.sort_by(f64::total_cmp);
    let at = |share: usize| sorted.get((sorted.len() - 1) * share / 100).copied().unwrap_or(f64::NAN);
    let word = if at(50) <= most { "ok" } else { "OVER" };
    println!("{name:<56}{:>9.2}  {most} {word}   ({:.2} to {:.2})", at(50), at(0), at(100));
}

/// Runs of a thousand answers each: one is shorter than clocks are good for.
fn native() -> Vec<f64> {
    let run = |_| {
        let start = Instant::now();
        for _ in 0..1000 {
            std::hint::black_box(ask("sight", std::hint::black_box(ENTRY)));
        }
        start.elapsed().as_secs_f64()
    };
    (0..ROUNDS).map(run).collect()
}

fn typed(browser: &Browser, site: &Site, throttle: u32) -> Result<Vec<f64>> {
    let server = Server::start(site.clone(), 0).map_err(words)?;
    browser.go(&format!("{}#sight?{ENTRY}", server.url()))?;
    browser.wait("document.documentElement.dataset.offline")?;
    slow_down(browser, throttle)?;
    let times = browser.js(TYPE);
    slow_down(browser, 1)?;
    times?.as_array().ok_or("no times")?.iter().map(|time| time.as_f64().ok_or("no time".to_owned())).collect()
}

/// Types into the last row of a long book, as TYPE does; the decision follows when the keys pause.
fn booked(browser: &Browser, site: &Site, throttle: u32) -> Result<Vec<f64>> {
    let server = Server::start(site.clone(), 0).map_err(words)?;
    browser.go(&format!("{}#book", server.url()))?;
    browser.wait("document.documentElement.dataset.offline")?;
    let rows: Vec<String> = (0..500).map(|i| format!("CP {i}\t1234\t\t\t30\nCP {}\t\t\t1432\t31", i + 1)).collect();
    let give = "document.querySelector('[data-do=bring]').click();
        const area = document.querySelector('dialog textarea'); area.value = ROWS;
        area.dispatchEvent(new Event('input')); document.querySelector('.ways button:last-child').click();
        document.querySelector('.row:nth-child(1000) .brief').click(); return 0;";
    browser.js(&give.replace("ROWS", &json!(rows.join("\n")).to_string()))?;
    browser.wait("document.querySelector('#book-999-3')")?;
    slow_down(browser, throttle)?;
    let times = browser.js(&TYPE.replace("#field-distance", "#book-999-3").replace("40 + i", "1400 + i"));
    slow_down(browser, 1)?;
    times?.as_array().ok_or("no times")?.iter().map(|time| time.as_f64().ok_or("no time".to_owned())).collect()
}

/// Each round visits an origin of its own, of which nothing is kept yet.
fn cold(browser: &Browser, site: &Site) -> Result<Vec<f64>> {
    let line = |latency: u32, speed: i64| {
        let speeds =
            json!({ "offline": false, "latency": latency, "downloadThroughput": speed, "uploadThroughput": speed });
        browser.cdp("Network.emulateNetworkConditions", speeds).map(drop)
    };
    browser.cdp("Network.enable", json!({}))?;
    let mut times = vec![];
    for _ in 0..ROUNDS {
        let server = Server::start(site.clone(), 0).map_err(words)?;
        server.compress();
        line(LATENCY_MS, BYTES_PER_SECOND.into())?;
        slow_down(browser, 4)?;
        times.push(visit(browser, &server.url())?);
        line(0, -1)?;
        slow_down(browser, 1)?;
    }
    Ok(times)
}

/// The worker is stopped before each round, as a phone does; it itself runs unthrottled, Chromium has no way to slow it.
fn warm(browser: &Browser, site: &Site) -> Result<Vec<f64>> {
    let server = Server::start(site.clone(), 0).map_err(words)?;
    let url = format!("{}#sight", server.url());
    browser.go(&url)?;
    browser.wait("document.documentElement.dataset.offline && navigator.serviceWorker.controller")?;
    drop(server);
    browser.cdp("ServiceWorker.enable", json!({}))?;
    let mut times = vec![];
    for _ in 0..ROUNDS {
        browser.go("about:blank")?;
        browser.cdp("ServiceWorker.stopAllWorkers", json!({}))?;
        slow_down(browser, 6)?;
        times.push(visit(browser, &url)?);
        slow_down(browser, 1)?;
    }
    Ok(times)
}

fn visit(browser: &Browser, url: &str) -> Result<f64> {
    browser.go(url)?;
    browser.wait("globalThis.readyAt")?;
    browser.js("return readyAt")?.as_f64().ok_or("no time".to_owned())
}

fn slow_down(browser: &Browser, rate: u32) -> Result<Value> {
    browser.cdp("Emulation.setCPUThrottlingRate", json!({ "rate": rate }))
}
