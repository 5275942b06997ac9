//! The files of the site, from the page's own files and the bindings.
//!
//! Names carry no hashes: the page asks for nothing after it has started, and the worker takes a version whole or not at
//! all, each file by its digest.

use crate::bare::bare;
use crate::policy::{self, integrity};
use crate::single;
use crate::wasm::Bindings;
use anyhow::{Context, Result, ensure};
use sha2::{Digest, Sha256};
use std::collections::BTreeMap;
use std::fs;
use std::path::Path;

pub const PAGE: &str = "index.html";
pub const WORKER: &str = "sw.js";
pub const SINGLE: &str = "farstaff.html";
pub const WASM: &str = "farstaff.wasm";
pub const GLUE: &str = "core.js";
pub const STYLE: &str = "style.css";
/// The module that starts the page.
pub const START: &str = "app.js";

const HEAD: &str = "<!--HEAD-->";
const VERSION: &str = "@@VERSION@@";
const FILES: &str = "[[\"@@FILES@@\", \"\"]]";

/// Every file of a site by its name.
#[derive(Clone)]
pub struct Site(pub BTreeMap<String, Vec<u8>>);

/// What a site is assembled from.
#[derive(Clone)]
pub struct Sources {
    /// The page and its worker, with the places still open which the build fills.
    pub page: String,
    pub worker: String,
    /// Every other file by name: modules, style, icons, manifest, the wasm and its glue.
    pub parts: BTreeMap<String, Vec<u8>>,
}

impl Sources {
    /// Reads the page's folder.
    pub fn read(dir: &Path, bindings: Bindings) -> Result<Sources> {
        let mut parts =
            BTreeMap::from([(WASM.to_owned(), bindings.wasm), (GLUE.to_owned(), bare(&bindings.js).into_bytes())]);
        for entry in fs::read_dir(dir).with_context(|| dir.display().to_string())? {
            let path = entry?.path();
            let name = path.file_name().and_then(|name| name.to_str()).context("a file name that is not text")?;
            // Declarations are for the type check alone.
            if !name.ends_with(".d.ts") {
                let mut bytes = fs::read(&path).with_context(|| name.to_owned())?;
                if name.ends_with(".js") {
                    bytes = bare(&String::from_utf8(bytes).with_context(|| name.to_owned())?).into_bytes();
                }
                ensure!(parts.insert(name.to_owned(), bytes).is_none(), "{name} is a name the build gives itself");
            }
        }
        let mut take = |name: &str| -> Result<String> {
            Ok(String::from_utf8(parts.remove(name).with_context(|| format!("{name} is missing"))?)?)
        };
        Ok(Sources { page: take(PAGE)?, worker: take(WORKER)?, parts })
    }

    /// Fills the open places.
    pub fn assemble(&self) -> Result<Site> {
        for name in [STYLE, START] {
            ensure!(self.parts.contains_key(name), "{name} is missing");
            ensure!(!self.page.contains(name), "{PAGE} names {name}; the build does that at {HEAD}");
        }
        let version = self.version();
        let page = fill(&self.page, VERSION, &version).context(PAGE)?;
        let mut files = self.parts.clone();
        let single = single::page(&page, &self.parts)?;
        let page = fill(&page, HEAD, &self.head()).context(PAGE)?.into_bytes();

        let mut list = vec![["", &integrity(&page)].map(str::to_owned)];
        list.extend(self.parts.iter().map(|(name, bytes)| [name.clone(), integrity(bytes)]));
        let worker = fill(&self.worker, VERSION, &version).context(WORKER)?;
        let worker = fill(&worker, FILES, &serde_json::to_string(&list)?).context(WORKER)?;

        files.insert(PAGE.to_owned(), page);
        files.insert(WORKER.to_owned(), worker.into_bytes());
        files.insert(SINGLE.to_owned(), single.into_bytes());
        Ok(Site(files))
    }

    /// Names of the modules, the glue among them.
    fn modules(&self) -> impl Iterator<Item = &str> {
        self.parts.keys().map(String::as_str).filter(|name| name.ends_with(".js"))
    }

    /// The policy comes first, so that it rules everything that follows.
    fn head(&self) -> String {
        let mut head = vec![
            policy::meta(policy::SERVED),
            format!("<link rel=\"stylesheet\" href=\"{STYLE}\">"),
            format!("<link rel=\"preload\" href=\"{WASM}\" as=\"fetch\" type=\"application/wasm\" crossorigin>"),
        ];
        head.extend(self.modules().map(|name| format!("<link rel=\"modulepreload\" href=\"{name}\">")));
        head.push(format!("<script type=\"module\" src=\"{START}\"></script>"));
        head.join("\n")
    }

    /// Changes when any byte of the site's sources does.
    fn version(&self) -> String {
        let own = [(PAGE, self.page.as_bytes()), (WORKER, self.worker.as_bytes())];
        let parts = self.parts.iter().map(|(name, bytes)| (name.as_str(), bytes.as_slice()));
        let mut all = Sha256::new();
        for (name, bytes) in own.into_iter().chain(parts) {
            // Each digest has the same length: nothing can slip from one file into the next.
            all.update(Sha256::digest(name));
            all.update(Sha256::digest(bytes));
        }
        all.finalize()[..5].iter().map(|byte| format!("{byte:02x}")).collect()
    }
}

impl Site {
    /// Writes the folder anew.
    pub fn write(&self, dir: &Path) -> Result<()> {
        if dir.exists() {
            fs::remove_dir_all(dir)?;
        }
        fs::create_dir_all(dir)?;
        for (name, bytes) in &self.0 {
            fs::write(dir.join(name), bytes).with_context(|| name.clone())?;
        }
        Ok(())
    }
}

/// Fills an open place, which must be there.
pub fn fill(text: &str, place: &str, with: &str) -> Result<String> {
    ensure!(text.contains(place), "{place} does not stand there");
    Ok(text.replace(place, with))
}
