//! The page speaks to its own origin and to nobody else.

use crate::Stage;
use farstaff_tests::Result;
use farstaff_tests::steps::{Tally, check, same};
use farstaff_www::serve::{Seen, Server};
use std::time::{Duration, Instant};

pub fn run(tally: &mut Tally, stage: &Stage) {
    tally.step("nothing is asked for but the page's own files", || {
        let server = stage.open()?;
        stage.browser.wait("document.documentElement.dataset.offline")?;
        same(strange(&server), vec![])
    });
    // Without this the step above could not fail: what the policy stops never leaves the browser.
    tally.step("a request elsewhere is stopped and shows in the log", || {
        let server = stage.open()?;
        stage.browser.js("new Image().src = 'http://elsewhere.test/'; await 0;")?;
        wait_for(&server, |seen| seen.path == "/blocked")
    });
    tally.step("a request for anything else shows in the log", || {
        let server = stage.open()?;
        // Not a GET, which the worker would answer once it is in charge.
        stage.browser.js("await fetch('./missing', { method: 'POST' }).catch(() => 0); return 0;")?;
        wait_for(&server, |seen| seen.path == "/missing")
    });
    tally.step("text cannot become code", || {
        let _server = stage.open()?;
        let body = "try { document.createElement('p').innerHTML = '<b>x</b>'; } catch (e) { return e.name } return ''";
        same(stage.browser.js(body)?, serde_json::json!("TypeError"))
    });
}

/// Requests that the page has no reason for, reports of the content security policy among them.
pub fn strange(server: &Server) -> Vec<Seen> {
    // A browser asks for this by itself where its window shows no icon of the page's own.
    server.seen().into_iter().filter(|seen| seen.status >= 400 && seen.path != "/favicon.ico").collect()
}

fn wait_for(server: &Server, wanted: impl Fn(&Seen) -> bool) -> Result<()> {
    let start = Instant::now();
    while !strange(server).iter().any(&wanted) && start.elapsed() < Duration::from_secs(10) {
        std::thread::sleep(Duration::from_millis(30));
    }
    check(strange(server).iter().any(&wanted), || format!("the log holds {:?}", strange(server)))
}
