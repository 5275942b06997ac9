//! Scripts without their comments: those are for whoever reads the sources, and a quarter of what would travel.

const OPENS: &str = "/**";
const CLOSES: &str = "*/";

/// `script` without lines that are comment only and without types said inside a line (`/** @type … */`). A comment that
/// begins behind code with `//` stays: to tell it from a text would need a parser.
pub fn bare(script: &str) -> String {
    let mut bare = String::with_capacity(script.len());
    let mut inside = false;
    for line in script.lines() {
        let words = line.trim();
        let opens = words.starts_with(OPENS) && words.find(CLOSES).is_none_or(|at| at + CLOSES.len() == words.len());
        if inside || opens {
            inside = !words.ends_with(CLOSES);
        } else if !words.starts_with("//") {
            without_types(line, &mut bare);
            bare.push('\n');
        }
    }
    bare
}

fn without_types(line: &str, bare: &mut String) {
    let mut rest = line;
    while let Some((before, after)) = rest.split_once("/** @type ")
        && let Some((_, after)) = after.split_once(CLOSES)
    {
        bare.push_str(before);
        rest = after.strip_prefix(' ').unwrap_or(after);
    }
    bare.push_str(rest);
}
