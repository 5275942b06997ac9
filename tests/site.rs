//! The built site: its weight, and what it must not hold.

use farstaff_www::budget::{BUDGETS, sizes, total};
use farstaff_www::site::{SINGLE, Site};
use std::sync::OnceLock;

/// One build for all tests of this file.
fn site() -> &'static Site {
    static SITE: OnceLock<Site> = OnceLock::new();
    SITE.get_or_init(|| farstaff_www::build().expect("the page builds"))
}

#[test]
fn keeps_its_budgets() {
    let sizes = sizes(site());
    for budget in &BUDGETS {
        let weight = total(budget, &sizes).brotli;
        assert!(weight > 0, "{} weighs nothing: is its file still named so?", budget.name);
        assert!(weight <= budget.most, "{}: {weight} of {}", budget.name, budget.most);
    }
}

#[test]
fn scripts_travel_without_comments() {
    for (name, bytes) in site().0.iter().filter(|(name, _)| name.ends_with(".js") && *name != "core.js") {
        let script = String::from_utf8_lossy(bytes);
        let comment = script.lines().find(|line| line.trim().starts_with("//") || line.contains("/**"));
        assert_eq!(comment, None, "{name}");
        assert!(script.lines().count() > 10, "{name} lost more than its comments");
    }
}

#[test]
fn same_sources_give_the_same_bytes() {
    let sources = farstaff_www::sources().expect("the page builds");
    assert!(sources.assemble().expect("it assembles").0 == site().0);
}

#[test]
fn version_changes_with_every_file() {
    let sources = farstaff_www::sources().expect("the page builds");
    let first = sources.assemble().expect("it assembles");
    for name in sources.parts.keys() {
        let mut changed = sources.clone();
        changed.parts.get_mut(name).expect("just seen").push(b' ');
        let changed = changed.assemble().expect("it assembles");
        assert_ne!(changed.0["index.html"], first.0["index.html"], "{name} changed and the version did not");
        assert_ne!(changed.0["sw.js"], first.0["sw.js"], "{name} changed and the worker did not");
    }
}

#[test]
fn holds_no_address_and_no_path_of_the_machine_that_built_it() {
    let home = std::env::var("HOME").expect("HOME is set");
    for (name, bytes) in &site().0 {
        let text = String::from_utf8_lossy(bytes).replace("http://www.w3.org/2000/svg", "");
        for address in ["http://", "https://"] {
            assert!(!text.contains(address), "{name} holds {address}");
        }
        assert!(!text.contains(&home), "{name} holds {home}");
        assert!(!text.contains(env!("CARGO_MANIFEST_DIR")), "{name} holds the folder it was built in");
    }
}

#[test]
fn single_file_stands_alone() {
    let page = String::from_utf8(site().0[SINGLE].clone()).expect("text");
    for part in site().0.keys() {
        for reference in [format!("href=\"{part}\""), format!("src=\"{part}\""), format!("\"./{part}\"")] {
            assert!(!page.contains(&reference), "the single file needs {part}");
        }
    }
    assert!(page.contains("trusted-types 'none'") && !page.contains("connect-src"));
}
