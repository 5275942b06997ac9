//! A line by positions: its points out of a file of a receiver, and the picture asked by touch and by keys.

use crate::Stage;
use farstaff::question::figure::Mark;
use farstaff::question::{Answer, ask};
use farstaff_tests::engine::Key;
use farstaff_tests::steps::{Tally, check, same};
use farstaff_tests::{Result, entry};
use serde_json::json;

const ID: &str = "clearance";
const POINTS: &str = "profile";
const LINE: [(&str, &str); 7] = [
    ("ground_a", "120 m"),
    ("ground_b", "140 m"),
    ("positions", "latlon"),
    ("latitude_a", "52.1234"),
    ("longitude_a", "5.4321"),
    ("latitude_b", "52.1903"),
    ("longitude_b", "5.5608"),
];
const TRACK: &str = r#"<?xml version="1.0" encoding="UTF-8"?>
<gpx version="1.1" creator="invented" xmlns="http://www.topografix.com/GPX/1/1"><trk><trkseg>
<trkpt lat="52.1345" lon="5.4535"><ele>90</ele><name>Rush Mere</name></trkpt>
<trkpt lat="52.15685" lon="5.49645"><ele>118</ele><name>Kestrel Edge</name></trkpt>
<trkpt lat="52.1680" lon="5.5177"><ele>101</ele></trkpt>
</trkseg></trk></gpx>"#;

pub fn run(tally: &mut Tally, stage: &Stage) {
    tally.step("fields and columns of positions are in sight where they are chosen", || chosen(stage));
    tally.step("a GPX file comes in with a preview, and one tap takes its points", || file(stage));
    tally.step("a file that means harm is refused in words and takes nothing", || bomb(stage));
    tally.step("what has changed places is exchanged with one tap", || exchanged(stage));
    tally.step("what does not fit is said at its row", || told(stage));
    tally.step("the picture is read off by touch and by arrow keys to the worst point", || read_off(stage));
}

fn answer(more: &[(&str, &str)]) -> Result<(String, Answer)> {
    let asked = entry(&[&LINE[..], more].concat());
    let answer = ask(ID, &asked).ok_or("no such question")?;
    Ok((asked, answer))
}

fn open(stage: &Stage, more: &[(&str, &str)]) -> Result<farstaff_www::serve::Server> {
    let server = stage.open_at(&format!("#{ID}?{}", answer(more)?.0))?;
    stage.browser.viewport(412, 915)?;
    Ok(server)
}

/// The page has come to hold the entry that the native code makes of these.
fn holds(stage: &Stage, more: &[(&str, &str)]) -> Result<Answer> {
    let (asked, answer) = answer(more)?;
    let wanted = json!(format!("#{ID}?{}", answer.entry));
    stage.browser.wait(&format!("location.hash === {wanted}"))?;
    stage.decides(ID, &asked)
}

/// Hands a file to the window for pasting, as a person does who has picked it.
fn hand_over(stage: &Stage, text: &str) -> Result<()> {
    stage.browser.tap("[data-do=bring]")?;
    stage.browser.wait("document.querySelector('dialog[open] [type=file]')")?;
    stage.browser.js(&format!(
        "const files = new DataTransfer(); files.items.add(new File([{}], 'ridge.gpx'));
        const box = document.querySelector('dialog [type=file]'); box.files = files.files;
        box.dispatchEvent(new Event('change')); return 0;",
        json!(text)
    ))?;
    stage.browser.wait("document.querySelector('dialog [data-x=from]').textContent.includes('ridge.gpx')")
}

fn chosen(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = open(stage, &[])?;
    // A slow answer, and what hangs on it, waits for a pause of the keys.
    let sees = |wanted: [bool; 3]| {
        browser.wait(&format!(
            "JSON.stringify(['distance', 'latitude_a', 'easting_a'].map((name) =>
            document.querySelector(`[name=${{name}}]`).getClientRects().length > 0)) === '{}'",
            json!(wanted)
        ))
    };
    let columns = "return [...document.querySelectorAll('.row.open .cell:not([hidden]) input')].length";
    let by_position = browser.js(columns)?;
    sees([false, true, false])?;
    browser.js("document.querySelector('[name=positions][value=given]').click(); return 0;")?;
    sees([true, false, false])?;
    let by_distance = browser.js(columns)?;
    same(by_position.as_u64(), by_distance.as_u64().map(|n| n + 2))?;
    browser.js("document.querySelector('[name=positions][value=grid]').click(); return 0;")?;
    sees([false, false, true])?;
    // What was entered before comes back with the choice.
    browser.js("document.querySelector('[name=positions][value=latlon]').click(); return 0;")?;
    same(browser.js("return document.querySelector('[name=latitude_a]').value")?, json!("52.1234"))
}

fn file(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let _server = open(stage, &[])?;
    hand_over(stage, TRACK)?;
    browser.wait("document.querySelector('dialog .preview tbody')")?;
    let shown = browser.text("dialog")?;
    for words in ["3 track points", "Kestrel Edge", "52.15685", "above the ellipsoid or above sea level"] {
        check(shown.contains(words), || format!("the window does not say {words}: {shown}"))?;
    }
    // Nothing has gone in yet.
    check(!browser.text("#fields .rows")?.contains("Kestrel"), || "taken without being asked".to_owned())?;
    browser.tap(".ways button:last-child")?;
    browser.wait("!document.querySelector('dialog')")?;
    let answer = holds(stage, &[(POINTS, TRACK)])?;
    check(answer.results.iter().any(|r| r.name == "least" && r.value.is_some()), || "no answer".to_owned())?;
    browser.tap("#undo")?;
    browser.wait("!document.querySelector('#fields .rows').textContent.includes('Kestrel')")
}

fn bomb(stage: &Stage) -> Result<()> {
    let _server = open(stage, &[])?;
    hand_over(stage, &TRACK.replace("<gpx", "<!DOCTYPE gpx [<!ENTITY a \"ha\"><!ENTITY b \"&a;&a;\">]><gpx"))?;
    stage.browser.wait("document.querySelector('dialog').textContent.includes('declares entities of its own')")?;
    same(stage.browser.js("return document.querySelectorAll('.ways button').length")?, json!(0))
}

fn exchanged(stage: &Stage) -> Result<()> {
    let rows = ["5.4535\t52.1345\t90", "5.4854\t52.1512\t118"];
    let (wrong, right) = ("latitude\tlongitude\tground\n", "longitude\tlatitude\tground\n");
    let _server = open(stage, &[(POINTS, &(wrong.to_owned() + &rows.join("\n")))])?;
    stage.browser.wait("document.querySelector('.row .wrongs button')")?;
    stage.browser.tap(".row .wrongs button")?;
    holds(stage, &[(POINTS, &(right.to_owned() + &rows.join("\n")))]).map(drop)
}

fn told(stage: &Stage) -> Result<()> {
    let twice = "latitude\tlongitude\tground\n52.1512\t5.4854\t90\n52.1512\t5.4854\t95\n52.3\t5.9\t80";
    let _server = open(stage, &[(POINTS, twice)])?;
    let booked = answer(&[(POINTS, twice)])?.1.booked;
    let said = booked.first().ok_or("nothing is said at a row")?;
    check(said.rows.len() == 2, || format!("{said:?}"))?;
    for at in &said.rows {
        let texts: Vec<&str> = at.cautions.iter().map(|caution| caution.text.as_str()).collect();
        stage.browser.wait(&format!(
            "JSON.stringify([...document.querySelectorAll('.row:nth-child({}) .told')].map((each) => each.textContent))
            === {}",
            at.row + 1,
            json!(json!(texts).to_string())
        ))?;
    }
    Ok(())
}

fn read_off(stage: &Stage) -> Result<()> {
    let browser = stage.browser;
    let more = [(POINTS, TRACK)];
    let (asked, answer) = answer(&more)?;
    let _server = stage.open_at(&format!("#{ID}?{asked}"))?;
    browser.viewport(412, 915)?;
    let figure = answer.figure.ok_or("no picture")?;
    let worst = figure.marks.iter().find_map(|mark| match mark {
        Mark::Span { x, .. } => Some(*x),
        _ => None,
    });
    let at =
        figure.readings.iter().position(|reading| Some(reading.at) == worst).ok_or("the worst point is not there")?;
    let says = |index: usize| {
        format!("document.getElementById('read-off').textContent === {}", json!(figure.readings[index].text))
    };
    check(at > 0 && figure.readings.len() > 2, || "nothing to move along".to_owned())?;
    // The worst point lies in the middle of the line, and so under a finger in the middle of the picture.
    browser.tap("#drawing .drawing")?;
    browser.wait(&says(at))?;
    same(browser.js("return document.querySelector('#drawing .cursor').getAttribute('d') !== ''")?, json!(true))?;
    browser.js("document.getElementById('drawing').focus(); return 0;")?;
    browser.key(Key::Home)?;
    browser.wait(&says(0))?;
    for _ in 0..at {
        browser.key(Key::Right)?;
    }
    browser.wait(&says(at))
}
