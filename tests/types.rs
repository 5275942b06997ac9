//! The page's JavaScript against the types made from the Rust structs.

use serde_json::{Value, json};
use std::path::Path;
use std::process::Command;

const STRICT: &str = r#"{ "checkJs": true, "allowJs": true, "noEmit": true, "strict": true, "noUncheckedIndexedAccess": true,
    "target": "es2023", "module": "esnext", "moduleResolution": "bundler", "types": [], "skipLibCheck": true }"#;

/// Checks some of the page's files; what the compiler says where it finds something.
fn check(name: &str, libraries: &[&str], files: &[&Path], roots: &[&Path]) -> Option<String> {
    let target = farstaff_www::target_dir().expect("cargo has a target folder");
    let mut options: Value = serde_json::from_str(STRICT).expect("JSON");
    options["lib"] = json!(libraries);
    options["rootDirs"] = json!(roots);
    let config = target.join("types").join(format!("{name}.json"));
    std::fs::write(&config, json!({ "compilerOptions": options, "files": files }).to_string()).expect("it is written");
    let compiler = farstaff_tests::npm_modules().expect("cargo has a target folder").join("typescript/bin/tsc");
    assert!(compiler.is_file(), "{} is missing; tests/run installs it", compiler.display());
    let out = Command::new("node").arg(compiler).arg("--project").arg(&config).output().expect("node is installed");
    (!out.status.success()).then(|| String::from_utf8_lossy(&out.stdout).into_owned())
}

#[test]
fn the_pages_scripts_fit_the_types() {
    farstaff_www::sources().expect("the page builds");
    let types = farstaff_www::target_dir().expect("cargo has a target folder").join("types");
    let page = Path::new(env!("CARGO_MANIFEST_DIR")).with_file_name("www").join("page");
    let start = page.join("app.js");
    // The page imports its bindings as a neighbour, which they are once built.
    let roots = [page.as_path(), types.as_path()];
    assert_eq!(check("page", &["es2023", "dom", "dom.iterable"], &[&start], &roots), None);
    assert_eq!(check("worker", &["es2023", "webworker"], &[&page.join("sw.js")], &[]), None);

    // A check that finds nothing may have looked at nothing.
    let wrong = types.join("wrong.js");
    std::fs::write(&wrong, "import { catalogue } from \"./core.js\";\ncatalogue().question;\n").expect("it is written");
    let found = check("wrong", &["es2023", "dom"], &[&wrong], &roots).expect("the wrong name is found");
    assert!(found.contains("questions"), "{found}");
}
