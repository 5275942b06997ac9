//! Builds the page: compiles the wasm, makes its bindings, puts the files together.
//!
//! The folder that comes out, `site` in cargo's target folder, is ready for any static host.

mod bare;
pub mod budget;
pub mod policy;
pub mod serve;
mod single;
pub mod site;
pub mod wasm;

use anyhow::{Context, Result};
use site::{Site, Sources};
use std::path::{Path, PathBuf};
use std::process::Command;

/// Builds everything and writes `site` and `types` into cargo's target folder.
pub fn build() -> Result<Site> {
    let site = sources()?.assemble()?;
    site.write(&target_dir()?.join("site"))?;
    Ok(site)
}

/// The page's own files and the bindings freshly made, from which a site is assembled. Writes `types`.
pub fn sources() -> Result<Sources> {
    let target = target_dir()?;
    let bindings = wasm::bind(&wasm::compile(&target)?)?;
    let types = target.join("types");
    std::fs::create_dir_all(&types)?;
    std::fs::write(types.join("core.d.ts"), &bindings.types)?;
    Sources::read(&root().join("www/page"), bindings)
}

/// Cargo's target folder, wherever the person has put it.
pub fn target_dir() -> Result<PathBuf> {
    let out = cargo().args(["metadata", "--format-version=1", "--no-deps", "--locked"]).output().context("cargo")?;
    anyhow::ensure!(out.status.success(), "cargo metadata: {}", String::from_utf8_lossy(&out.stderr));
    let metadata: serde_json::Value = serde_json::from_slice(&out.stdout)?;
    Ok(metadata["target_directory"].as_str().context("cargo names no target folder")?.into())
}

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR")).parent().unwrap_or(Path::new("."))
}

/// The cargo that runs this, in the workspace.
fn cargo() -> Command {
    let mut cargo = Command::new(std::env::var_os("CARGO").unwrap_or("cargo".into()));
    cargo.current_dir(root());
    cargo
}
