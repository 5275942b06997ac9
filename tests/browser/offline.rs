//! The page without a signal, and its next version.

use crate::Stage;
use farstaff_tests::steps::{Tally, check, same};
use farstaff_tests::{Result, words};
use farstaff_www::serve::Server;
use farstaff_www::site::{STYLE, Site, WORKER};
use serde_json::json;
use std::net::TcpStream;

/// Which build the open page belongs to: the second one carries a mark in its style.
const BUILD: &str = "return getComputedStyle(document.documentElement).getPropertyValue('--build').trim()";
const UPDATE: &str = "const reg = await navigator.serviceWorker.ready; await reg.update().catch(() => 0); return 0;";
const WAITING: &str = "return !!(await navigator.serviceWorker.ready).waiting";

pub fn run(tally: &mut Tally, stage: &Stage) {
    tally.step("the page reloads with the server stopped", || {
        let server = installed(stage)?;
        stop(server)?;
        stage.browser.reload()?;
        stage.usable()
    });
    tally.step("a copy the browser dropped is brought back", || dropped(stage));
    tally.step("a new version is offered, waits, and is taken when wanted", || new_version(stage));
    tally.step("half a new version leaves the old one at work", || half_version(stage));
}

/// Opens the page and waits until it says that it works offline.
fn installed(stage: &Stage) -> Result<Server> {
    let server = stage.open()?;
    stage.browser.wait("document.documentElement.dataset.offline")?;
    stage.browser.wait("navigator.serviceWorker.controller")?;
    Ok(server)
}

/// Stops the server and makes sure that nothing answers there any more.
fn stop(server: Server) -> Result<()> {
    let port = server.port();
    drop(server);
    check(TcpStream::connect(("127.0.0.1", port)).is_err(), || "the server still answers".to_owned())
}

/// A browser may empty the copy and leave its worker: the page then comes from the server, and the copy again.
fn dropped(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let server = installed(stage)?;
    browser.js("for (const name of await caches.keys()) await caches.delete(name); return 0;")?;
    browser.reload()?;
    stage.usable()?;
    browser.wait("document.documentElement.dataset.offline")?;
    stop(server)?;
    browser.reload()?;
    stage.usable()
}

fn second_build(stage: &Stage) -> Result<Site> {
    let mut sources = stage.sources.clone();
    let style = sources.parts.get_mut(STYLE).ok_or("no style")?;
    style.extend(b"\n:root { --build: second }\n");
    sources.assemble().map_err(words)
}

fn new_version(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let server = installed(stage)?;
    server.deploy(second_build(stage)?);
    browser.js(UPDATE)?;
    browser.wait("document.querySelector('#update')?.checkVisibility()")?;
    same(browser.js(BUILD)?, json!(""))?;
    browser.reload()?;
    stage.usable()?;
    same(browser.js(BUILD)?, json!(""))?;
    browser.wait("document.querySelector('#update')?.checkVisibility()")?;
    browser.tap("#update")?;
    browser.wait("getComputedStyle(document.documentElement).getPropertyValue('--build').trim() === 'second'")?;
    stop(server)?;
    browser.reload()?;
    stage.usable()?;
    same(browser.js(BUILD)?, json!("second"))
}

/// The new worker is there already, one of its files is still the old one.
fn half_version(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let server = installed(stage)?;
    let mut half = second_build(stage)?;
    let old = stage.sources.parts.get(STYLE).ok_or("no style")?.clone();
    half.0.insert(STYLE.to_owned(), old);
    server.deploy(half);
    let before = taken(&server, WORKER);
    browser.js(UPDATE)?;
    check(taken(&server, WORKER) > before, || "the browser did not look for a new worker".to_owned())?;
    browser.wait("(await navigator.serviceWorker.ready).installing === null")?;
    same(browser.js(WAITING)?, json!(false))?;
    stop(server)?;
    browser.reload()?;
    stage.usable()?;
    same(browser.js(BUILD)?, json!(""))
}

fn taken(server: &Server, name: &str) -> usize {
    server.seen().iter().filter(|seen| seen.path.trim_start_matches('/') == name).count()
}
