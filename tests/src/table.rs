//! The reference rows: entries with checked figures, `tables/ID.tsv`, and entries without, `tables/entries.txt`.

use crate::{Result, entry};
use std::path::PathBuf;

/// Written once in a table's head, meant in its rows; a tab and a new line within a cell.
const SHORT: [(&str, &str); 4] = [
    ("&K1", "&k_doubt=0&collimation_doubt=0&reading_doubt=0&reading_growth=0&distance_doubt=0&share=100 %"),
    ("&K0", "&k_doubt=0&night_k_doubt=0&ground_doubt=0&cover_doubt=0"),
    ("\\t", "\t"),
    ("\\n", "\n"),
];

/// One checked figure of a question.
pub struct Row {
    /// As the table has it.
    pub written: String,
    /// As an HTML form submits it.
    pub entry: String,
    /// Name of a result, `verdict` or `number`.
    pub what: String,
    /// SI figure, or words.
    pub figure: String,
    /// How far off it may be, or `absent`.
    pub tolerance: String,
    /// Where it comes from.
    pub source: String,
}

/// The checked figures of a question.
pub fn rows(id: &str) -> Result<Vec<Row>> {
    read(&format!("{id}.tsv"))?
        .iter()
        .map(|line| {
            let cells: Vec<String> = line.split('\t').map(str::to_owned).collect();
            let count = cells.len();
            let [written, what, figure, tolerance, source] =
                <[String; 5]>::try_from(cells).map_err(|_| format!("{id}.tsv: {count} cells: {line}"))?;
            let long = SHORT.iter().fold(written.clone(), |text, (short, long)| text.replace(short, long));
            let pairs: Vec<(&str, &str)> = long.split('&').filter_map(|pair| pair.split_once('=')).collect();
            Ok(Row { entry: entry(&pairs), written, what, figure, tolerance, source })
        })
        .collect()
}

/// Entries of every kind, good and bad, by question: one `id?entry` a line.
pub fn entries() -> Result<Vec<(String, String)>> {
    let lines = read("entries.txt")?;
    let split = |line: &String| Some(line.split_once('?')?).map(|(id, entry)| (id.to_owned(), entry.to_owned()));
    lines.iter().map(|line| split(line).ok_or(format!("entries.txt: {line}"))).collect()
}

/// Lines of a table that are no remarks.
fn read(name: &str) -> Result<Vec<String>> {
    let path = PathBuf::from(env!("CARGO_MANIFEST_DIR")).join("tables").join(name);
    let text = std::fs::read_to_string(&path).map_err(|error| format!("{}: {error}", path.display()))?;
    Ok(text.lines().filter(|line| !line.is_empty() && !line.starts_with('#')).map(str::to_owned).collect())
}
