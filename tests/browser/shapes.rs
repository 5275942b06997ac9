//! The page as one file, from the disk.

use crate::{ASKED, Stage};
use farstaff_tests::steps::{Tally, same};
use farstaff_tests::{Result, words};
use farstaff_www::site::SINGLE;
use serde_json::json;

pub fn run(tally: &mut Tally, stage: &Stage) {
    tally.step("the single file answers from the disk", || single(stage));
}

fn single(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let site = stage.sources.assemble().map_err(words)?;
    let file = stage.out.join(SINGLE);
    std::fs::write(&file, site.0.get(SINGLE).ok_or("no single file")?).map_err(words)?;
    browser.go(&format!("file://{}#sight?{ASKED}", file.display()))?;
    stage.usable()?;
    same(browser.js("return location.protocol")?, json!("file:"))?;
    stage.decides("sight", ASKED)?;
    browser.enter("#field-distance", "140")?;
    stage.decides("sight", &ASKED.replace("=60+", "=140+")).map(drop)
}
