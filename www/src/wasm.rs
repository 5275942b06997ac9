//! The wasm and its bindings.

use crate::{cargo, root};
use anyhow::{Context, Result, bail, ensure};
use std::path::{Path, PathBuf};
use std::process::Command;

const TARGET: &str = "wasm32-unknown-unknown";

/// What the page loads of the calculator, and the types its JavaScript is checked against.
#[derive(Clone)]
pub struct Bindings {
    pub js: String,
    pub types: String,
    pub wasm: Vec<u8>,
}

/// Compiles the boundary for the page.
pub fn compile(target: &Path) -> Result<PathBuf> {
    add_target()?;
    // Panic messages name the file they are in: without this the person's home folder, and other bytes on each machine.
    let flags = format!("--remap-path-prefix={}=crates", cargo_home()?.join("registry/src").display());
    let status = cargo()
        .args(["build", "--quiet", "--locked", "--package=farstaff-wasm", "--profile=wasm-release"])
        .arg(format!("--target={TARGET}"))
        .env("CARGO_ENCODED_RUSTFLAGS", flags)
        .status()
        .context("cargo")?;
    ensure!(status.success(), "the wasm does not compile");
    Ok(target.join(TARGET).join("wasm-release/farstaff_wasm.wasm"))
}

/// Makes the JavaScript that calls the wasm, in memory.
pub fn bind(wasm: &Path) -> Result<Bindings> {
    let mut out = wasm_bindgen_cli_support::Bindgen::new()
        .input_path(wasm)
        .web(true)?
        .typescript(true)
        .omit_default_module_path(true)
        .remove_name_section(true)
        .remove_producers_section(true)
        .generate_output()?;
    // One empty list stands there per crate.
    let alone = out.snippets().values().all(Vec::is_empty) && out.local_modules().is_empty();
    ensure!(alone, "a crate brings JavaScript of its own, which this build does not place");
    let types = out.ts().context("no types")?.to_owned();
    Ok(Bindings { js: out.js().to_owned(), types, wasm: out.wasm_mut().emit_wasm() })
}

/// rust-toolchain.toml asks for the target, but rustup passes over it under RUSTUP_AUTO_INSTALL=0.
fn add_target() -> Result<()> {
    let rustc = std::env::var_os("RUSTC").unwrap_or("rustc".into());
    let out = Command::new(rustc).args(["--print", "sysroot"]).current_dir(root()).output().context("rustc")?;
    let sysroot = String::from_utf8(out.stdout)?;
    if Path::new(sysroot.trim()).join("lib/rustlib").join(TARGET).is_dir() {
        return Ok(());
    }
    eprintln!("adding Rust's target {TARGET}");
    let added = Command::new("rustup").args(["target", "add", TARGET]).current_dir(root()).status();
    if !added.is_ok_and(|status| status.success()) {
        bail!("Rust's wasm target is missing; type: rustup target add {TARGET}");
    }
    Ok(())
}

fn cargo_home() -> Result<PathBuf> {
    match std::env::var_os("CARGO_HOME") {
        Some(home) => Ok(home.into()),
        None => Ok(PathBuf::from(std::env::var_os("HOME").context("HOME is not set")?).join(".cargo")),
    }
}
