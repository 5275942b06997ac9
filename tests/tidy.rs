//! What the tree must not come to hold.

use farstaff::question::catalogue;
use std::collections::BTreeSet;
use std::path::Path;
use std::process::Command;

const LINES_AT_MOST: usize = 500;
const TOP: [&str; 8] = ["Cargo.lock", "Cargo.toml", "DEVELOPERS.md", "README.md", "core", "tests", "wasm", "www"];
/// Settings of lints, format and toolchain.
const SETTINGS: [&str; 3] = ["clippy.toml", "rust-toolchain.toml", "rustfmt.toml"];

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR")).parent().expect("the workspace")
}

/// Every file that is or would be committed, by its path.
fn files() -> Vec<String> {
    let list = ["ls-files", "--cached", "--others", "--exclude-standard"];
    let out = Command::new("git").args(list).current_dir(root()).output().expect("git");
    assert!(out.status.success(), "{}", String::from_utf8_lossy(&out.stderr));
    let names = String::from_utf8(out.stdout).expect("names are text");
    // A file that is deleted but not yet committed is still in git's list.
    let files: Vec<String> = names.lines().filter(|name| root().join(name).is_file()).map(str::to_owned).collect();
    assert!(files.len() > 50, "git knows {} files", files.len());
    files
}

fn text(name: &str) -> Option<String> {
    String::from_utf8(std::fs::read(root().join(name)).expect("it is there")).ok()
}

/// The page's own scripts: name and text.
fn scripts() -> Vec<(String, String)> {
    let files = files().into_iter().filter(|name| name.starts_with("www/page/") && name.ends_with(".js"));
    let scripts: Vec<(String, String)> =
        files.map(|name| (text(&name).expect("text"), name)).map(|(a, b)| (b, a)).collect();
    assert!(scripts.len() > 5, "{} scripts", scripts.len());
    scripts
}

#[test]
fn no_file_is_too_long() {
    // Data and locks are not read from top to bottom.
    let data = [".tsv", ".csv", ".lock", "-lock.json", ".png"];
    for name in files().iter().filter(|name| !data.iter().any(|end| name.ends_with(end))) {
        let lines = text(name).map_or(0, |text| text.lines().count());
        assert!(lines <= LINES_AT_MOST, "{name} has {lines} lines");
    }
}

#[test]
fn the_top_level_holds_what_it_may() {
    let names: BTreeSet<String> = files().iter().filter_map(|name| name.split('/').next().map(str::to_owned)).collect();
    for name in names {
        let known = TOP.contains(&name.as_str()) || SETTINGS.contains(&name.as_str()) || name.starts_with('.');
        assert!(known, "{name} does not belong there");
    }
}

#[test]
fn the_page_asks_nobody_else() {
    for name in files().iter().filter(|name| name.starts_with("www/page/")) {
        let Some(text) = text(name) else { continue };
        let text = text.replace("http://www.w3.org/2000/svg", "");
        for address in ["http://", "https://", "ws://", "wss://", "\"//", "'//", "url(//"] {
            assert!(!text.contains(address), "{name} holds {address}");
        }
    }
}

#[test]
fn scripts_know_no_question_and_no_field() {
    let catalogue = catalogue();
    let mut names: BTreeSet<&str> = catalogue.questions.iter().map(|question| question.id).collect();
    names.extend(catalogue.questions.iter().flat_map(|question| question.fields).map(|field| field.name));
    for (file, script) in scripts() {
        for name in &names {
            for written in [format!("\"{name}\""), format!("'{name}'"), format!("`{name}`"), format!("#{name}\"")] {
                assert!(!script.contains(&written), "{file} names {written}");
            }
        }
    }
}

#[test]
fn scripts_read_and_round_no_number() {
    for (file, script) in scripts() {
        let drawing = file.ends_with("figure.js");
        for word in ["parseFloat", "parseInt", "toPrecision", "toExponential", "toFixed", "Intl.NumberFormat"] {
            // Places in a drawing are rounded to tenths of a pixel.
            assert!((drawing && word == "toFixed") || !script.contains(word), "{file} holds {word}");
        }
        for way in ["innerHTML", "outerHTML", "insertAdjacentHTML", "document.write", "eval(", "new Function"] {
            assert!(!script.contains(way), "{file} makes code of text: {way}");
        }
    }
}

#[test]
fn nothing_rests_on_what_lies_outside() {
    // Papers may speak of the plan beside the tree; nothing that is built or tested may use it.
    for name in files().iter().filter(|name| !name.ends_with(".md") && !name.ends_with("tidy.rs")) {
        let Some(text) = text(name) else { continue };
        assert!(!text.contains("../shared"), "{name} uses what lies beside the tree");
    }
}

#[test]
fn nothing_is_left_to_be_done() {
    for name in files().iter().filter(|name| name.ends_with(".rs") || name.ends_with(".js") || name.ends_with(".css")) {
        let text = text(name).expect("text");
        for mark in [
            concat!("TO", "DO"),
            concat!("FIX", "ME"),
            concat!("XX", "X"),
            concat!("todo", "!("),
            concat!("unimple", "mented!("),
        ] {
            assert!(!text.contains(mark), "{name} holds {mark}");
        }
    }
}
