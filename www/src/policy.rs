//! What the page may do: the content security policy, once.

use base64::{Engine, prelude::BASE64_STANDARD};
use sha2::{Digest, Sha256};

/// The served page: its own files, nothing else. The one policy `sw` is for registering the service worker.
pub const SERVED: &str = "default-src 'none'; script-src 'self' 'wasm-unsafe-eval'; style-src 'self'; \
     img-src 'self' data: blob:; connect-src 'self'; manifest-src 'self'; worker-src 'self'; base-uri 'none'; \
     form-action 'none'; require-trusted-types-for 'script'; trusted-types sw";

/// What a policy can say in a header only. What it stops is reported to the server itself, whose log then shows it.
pub const HEADER_ONLY: &str = "frame-ancestors 'none'; report-uri /blocked";

/// The single file: no connection at all; its modules stand in the import map as data: addresses.
pub fn single(scripts: &[&str], style: &str) -> String {
    let scripts: Vec<String> = scripts.iter().map(|text| format!("'{}'", integrity(text.as_bytes()))).collect();
    format!(
        "default-src 'none'; script-src data: 'wasm-unsafe-eval' {}; style-src '{}'; img-src data: blob:; \
         base-uri 'none'; form-action 'none'; require-trusted-types-for 'script'; trusted-types 'none'",
        scripts.join(" "),
        integrity(style.as_bytes())
    )
}

/// The policy as an element of the page's head.
pub fn meta(policy: &str) -> String {
    format!("<meta http-equiv=\"Content-Security-Policy\" content=\"{policy}\">")
}

/// A digest as policies and integrity checks write it.
pub fn integrity(bytes: &[u8]) -> String {
    format!("sha256-{}", BASE64_STANDARD.encode(Sha256::digest(bytes)))
}
