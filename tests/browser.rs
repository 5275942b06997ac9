//! The page in real Chromium, Firefox and WebKit. A browser that is missing fails the run.
//!
//! `cargo test -p farstaff-tests --test browser -- firefox kept` runs one engine and one group of steps only. Pictures and
//! printed sheets come to lie in `browser` in cargo's target folder.

#[path = "browser/access.rs"]
mod access;
#[path = "browser/book.rs"]
mod book;
#[path = "browser/boundary.rs"]
mod boundary;
#[path = "browser/decision.rs"]
mod decision;
#[path = "browser/errors.rs"]
mod errors;
#[path = "browser/kept.rs"]
mod kept;
#[path = "browser/keyboard.rs"]
mod keyboard;
#[path = "browser/network.rs"]
mod network;
#[path = "browser/offline.rs"]
mod offline;
#[path = "browser/pictures.rs"]
mod pictures;
#[path = "browser/profile.rs"]
mod profile;
#[path = "browser/shapes.rs"]
mod shapes;
#[path = "browser/table.rs"]
mod table;

use farstaff::question::{Answer, ask};
use farstaff_tests::engine::{Browser, Engine};
use farstaff_tests::steps::{Tally, same};
use farstaff_tests::{Result, words};
use farstaff_www::serve::Server;
use farstaff_www::site::Sources;
use serde_json::json;
use std::path::PathBuf;

/// A decision as people ask for it, in the form an address carries.
pub const ASKED: &str = "distance=60+m&tolerance=3+mm&line_height=1.2+m&sky=sunny";
/// An address of which every field is wrong that can be.
pub const WRONG: &str = "distance=far&tolerance=0&line_height=-3&k=1,2,3&collimation=5+kg";

/// What every step works with. Each step starts a server of its own, and so has an origin with nothing remembered.
pub struct Stage<'a> {
    pub browser: &'a Browser,
    pub sources: &'a Sources,
    /// Folder for pictures, papers and what the browsers say.
    pub out: PathBuf,
}

impl Stage<'_> {
    /// Serves the page.
    pub fn serve(&self) -> Result<Server> {
        Server::start(self.sources.assemble().map_err(words)?, 0).map_err(words)
    }

    /// Serves the page and opens it.
    pub fn open(&self) -> Result<Server> {
        self.open_at("")
    }

    /// Serves the page and opens it at a question, with an entry where one follows.
    pub fn open_at(&self, place: &str) -> Result<Server> {
        let server = self.serve()?;
        self.browser.go(&format!("{}{place}", server.url()))?;
        self.usable()?;
        Ok(server)
    }

    /// Waits until the page can be used.
    pub fn usable(&self) -> Result<()> {
        self.browser.wait("document.documentElement.dataset.ready")
    }

    /// Waits until the decision in view is what the native code says.
    pub fn decides(&self, id: &str, entry: &str) -> Result<Answer> {
        let answer = ask(id, entry).ok_or(format!("no question {id}"))?;
        let verdict = &answer.verdict;
        let wanted = json!([verdict.word, verdict.number, verdict.sentence]);
        let shown = "['word', 'number', 'sentence'].map((id) => document.getElementById(id).textContent)";
        // A finger's tap takes effect a moment after the driver has done with it.
        let wait = self.browser.wait(&format!("JSON.stringify({shown}) === JSON.stringify({wanted})"));
        wait.or_else(|_| same(self.browser.js(&format!("return {shown}"))?, wanted))?;
        Ok(answer)
    }
}

/// A group of steps, by its name.
type Group = (&'static str, fn(&mut Tally, &Stage));

const GROUPS: [Group; 13] = [
    ("boundary", boundary::run),
    ("network", network::run),
    ("decision", decision::run),
    ("keyboard", keyboard::run),
    ("errors", errors::run),
    ("kept", kept::run),
    ("offline", offline::run),
    ("shapes", shapes::run),
    ("access", access::run),
    ("pictures", pictures::run),
    ("table", table::run),
    ("profile", profile::run),
    ("book", book::run),
];

fn main() {
    let only: Vec<String> = std::env::args().skip(1).filter(|arg| !arg.starts_with('-')).collect();
    let engines: Vec<Engine> = picked(Engine::ALL.to_vec(), |engine| only.contains(&engine.to_string()));
    let groups = picked(GROUPS.to_vec(), |(name, _)| only.iter().any(|word| word == name));
    let mut tally = Tally::default();
    let sources = farstaff_www::sources().expect("the page builds");
    let out = farstaff_www::target_dir().expect("cargo has a target folder").join("browser");
    std::fs::create_dir_all(&out).expect("the target folder can be written");
    for engine in engines {
        println!("{engine}");
        let log = out.join(format!("{engine}.log"));
        let Some(browser) = tally.step("starts", || engine.start(&log)) else { continue };
        println!("       {}", browser.version());
        let stage = Stage { browser: &browser, sources: &sources, out: out.clone() };
        for (_, run) in &groups {
            run(&mut tally, &stage);
        }
    }
    tally.end()
}

/// Those that are named, or all where none is.
fn picked<T: Clone>(all: Vec<T>, named: impl Fn(&T) -> bool) -> Vec<T> {
    let some: Vec<T> = all.iter().filter(|one| named(one)).cloned().collect();
    if some.is_empty() { all } else { some }
}
