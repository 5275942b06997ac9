//! The whole page in one file, from the same sources: does everything but install.

use crate::policy;
use crate::site::{GLUE, START, STYLE, WASM, fill};
use anyhow::{Context, Result, ensure};
use base64::{Engine, prelude::BASE64_STANDARD};
use std::collections::BTreeMap;

type Parts = BTreeMap<String, Vec<u8>>;

/// `page` is the page with its version filled in and its head still open.
pub fn page(page: &str, parts: &Parts) -> Result<String> {
    let style = text(parts, STYLE)?;
    let modules: Vec<&str> = parts.keys().map(String::as_str).filter(|name| name.ends_with(".js")).collect();
    // A module that is a data: address has no folder: what it imports as "./form.js" it must import as "form.js", which
    // the import map resolves.
    let mut imports = BTreeMap::new();
    for name in &modules {
        let mut js = text(parts, name)?.to_owned();
        for other in &modules {
            js = js.replace(&format!("\"./{other}\""), &format!("\"{other}\""));
        }
        imports.insert(*name, data("text/javascript", js.as_bytes()));
    }
    ensure!(imports.contains_key(GLUE), "{GLUE} is missing");
    let map = serde_json::json!({ "imports": imports }).to_string();
    let start = format!("import \"{START}\";");
    let wasm = BASE64_STANDARD.encode(parts.get(WASM).context(WASM)?);
    let head = [
        policy::meta(&policy::single(&[&map, &start], style)),
        format!("<style>{style}</style>"),
        format!("<script type=\"importmap\">{map}</script>"),
        format!("<script type=\"application/wasm+base64\" id=\"wasm\">{wasm}</script>"),
        format!("<script type=\"module\">{start}</script>"),
    ];
    let lines: Vec<String> = page.lines().filter_map(|line| stand_alone(line, parts)).collect();
    fill(&lines.join("\n"), "<!--HEAD-->", &head.join("\n"))
}

/// A line of the page without the files beside it: the icon moves in, what serves installing is left out.
fn stand_alone(line: &str, parts: &Parts) -> Option<String> {
    if line.contains("rel=\"manifest\"") || line.contains("rel=\"apple-touch-icon\"") {
        return None;
    }
    let icon =
        parts.iter().find(|(name, _)| line.contains("rel=\"icon\"") && line.contains(&format!("href=\"{name}\"")));
    Some(match icon {
        Some((name, bytes)) => {
            let kind = crate::serve::media_type(name);
            line.replace(&format!("href=\"{name}\""), &format!("href=\"{}\"", data(kind, bytes)))
        }
        None => line.to_owned(),
    })
}

fn text<'a>(parts: &'a Parts, name: &str) -> Result<&'a str> {
    Ok(std::str::from_utf8(parts.get(name).with_context(|| format!("{name} is missing"))?)?)
}

fn data(kind: &str, bytes: &[u8]) -> String {
    format!("data:{kind};base64,{}", BASE64_STANDARD.encode(bytes))
}
