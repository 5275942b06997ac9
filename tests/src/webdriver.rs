//! A blocking WebDriver client, for Chromium and WebKit.

use crate::child::{Child, Display, Scratch, find, free_port, is_root};
use crate::{Result, words};
use serde_json::{Value, json};
use std::path::Path;
use std::process::Command;
use std::rc::Rc;
use std::time::{Duration, Instant};

/// A browser under its own vendor's driver. Fields are dropped in this order: the display goes last.
pub struct Session {
    agent: ureq::Agent,
    base: String,
    pub version: String,
    killed: bool,
    _driver: Child,
    _display: Option<Display>,
    _profile: Rc<Scratch>,
}

impl Session {
    /// Chromium, whose page sees only this machine: every other name is unknown to it.
    pub fn chromium(log: &Path, profile: Rc<Scratch>) -> Result<Session> {
        let port = free_port()?;
        let mut driver = Command::new(find(&["chromedriver"])?);
        driver.arg(format!("--port={port}"));
        let mut args = vec![
            "--headless=new".to_owned(),
            "--disable-gpu".to_owned(),
            "--no-first-run".to_owned(),
            "--disable-background-networking".to_owned(),
            "--disable-component-update".to_owned(),
            "--disable-sync".to_owned(),
            "--host-resolver-rules=MAP * ~NOTFOUND, EXCLUDE localhost, EXCLUDE 127.0.0.1".to_owned(),
            format!("--user-data-dir={}", profile.0.display()),
        ];
        if is_root() {
            args.push("--no-sandbox".to_owned());
        }
        let options = json!({ "args": args, "binary": find(&["chromium"])? });
        let driver = Child::start(&driver, log)?;
        let wanted = json!({ "browserName": "chrome", "goog:chromeOptions": options });
        Session::open(port, wanted, driver, None, profile)
    }

    /// WebKit, which has no headless mode: it draws on a display in memory. Under a driver it keeps nothing on disk.
    pub fn webkit(log: &Path, profile: Rc<Scratch>) -> Result<Session> {
        let port = free_port()?;
        let display = Display::start(log)?;
        let mut driver = Command::new(find(&["WebKitWebDriver"])?);
        driver.arg(format!("--port={port}")).envs([
            ("DISPLAY", display.name.as_str()),
            ("GTK_A11Y", "none"),
            ("NO_AT_BRIDGE", "1"),
            ("LIBGL_ALWAYS_SOFTWARE", "1"),
        ]);
        if is_root() {
            driver.env("WEBKIT_DISABLE_SANDBOX_THIS_IS_DANGEROUS", "1");
        }
        let machine = std::env::consts::ARCH;
        let browser = find(&[&format!("/usr/lib/{machine}-linux-gnu/webkit2gtk-4.1/MiniBrowser")])?;
        let options = json!({ "binary": browser, "args": ["--automation"] });
        let driver = Child::start(&driver, log)?;
        Session::open(port, json!({ "webkitgtk:browserOptions": options }), driver, Some(display), profile)
    }

    fn open(
        port: u16,
        wanted: Value,
        driver: Child,
        display: Option<Display>,
        profile: Rc<Scratch>,
    ) -> Result<Session> {
        let config = ureq::Agent::config_builder().timeout_global(Some(Duration::from_secs(60)));
        let agent = config.http_status_as_error(false).build().new_agent();
        let root = format!("http://127.0.0.1:{port}");
        let start = Instant::now();
        while agent.get(format!("{root}/status")).call().is_err() {
            if start.elapsed() > Duration::from_secs(20) {
                return Err("the driver does not start".to_owned());
            }
            std::thread::sleep(Duration::from_millis(20));
        }
        let base = format!("{root}/session");
        let mut session = Session {
            agent,
            base,
            version: String::new(),
            killed: false,
            _driver: driver,
            _display: display,
            _profile: profile,
        };
        let opened = session.post("", json!({ "capabilities": { "alwaysMatch": wanted } }))?;
        session.base = format!("{}/{}", session.base, opened["sessionId"].as_str().ok_or("no session")?);
        let said = &opened["capabilities"];
        session.version = format!("{} {}", said["browserName"], said["browserVersion"]).replace('"', "");
        session.post("timeouts", json!({ "script": 30_000, "pageLoad": 30_000 }))?;
        Ok(session)
    }

    /// Sends a command.
    pub fn post(&self, path: &str, body: Value) -> Result<Value> {
        let url = if path.is_empty() { self.base.clone() } else { format!("{}/{path}", self.base) };
        read(path, self.agent.post(&url).send_json(&body))
    }

    /// Asks for something.
    pub fn get(&self, path: &str) -> Result<Value> {
        read(path, self.agent.get(format!("{}/{path}", self.base)).call())
    }

    /// Runs an async function body in the page; what it returns passes through JSON.
    pub fn js(&self, body: &str) -> Result<Value> {
        let script = format!(
            "const done = arguments[arguments.length - 1]; (async () => {{ {body} }})()\
             .then(v => done([JSON.stringify(v) ?? 'null']), e => done(String(e)))"
        );
        match self.post("execute/async", json!({ "script": script, "args": [] }))? {
            Value::Array(value) => serde_json::from_str(value[0].as_str().unwrap_or("null")).map_err(words),
            error => Err(error.as_str().unwrap_or("the script failed").to_owned()),
        }
    }

    /// A handle of the first element that matches.
    pub fn element(&self, css: &str) -> Result<String> {
        let found = self.post("element", json!({ "using": "css selector", "value": css }))?;
        let id = found.as_object().and_then(|found| found.values().next()).and_then(Value::as_str);
        Ok(id.ok_or(format!("no element {css}"))?.to_owned())
    }

    /// Opens a tab, closes the one there was.
    pub fn next_tab(&self) -> Result<()> {
        let opened = self.post("window/new", json!({ "type": "tab" }))?["handle"].take();
        self.delete("window")?;
        self.post("window", json!({ "handle": opened })).map(drop)
    }

    /// Kills the browser with everything it runs, without a word to it.
    pub fn kill(mut self) {
        self.killed = true;
    }

    fn delete(&self, path: &str) -> Result<Value> {
        read(path, self.agent.delete(format!("{}/{path}", self.base)).call())
    }

    /// A command of Chromium's own protocol.
    pub fn cdp(&self, command: &str, params: Value) -> Result<Value> {
        self.post("goog/cdp/execute", json!({ "cmd": command, "params": params }))
    }
}

impl Drop for Session {
    fn drop(&mut self) {
        // The guard kills what does not close by itself.
        if !self.killed {
            let _ = self.agent.delete(&self.base).call();
        }
    }
}

fn read(path: &str, response: Result<ureq::http::Response<ureq::Body>, ureq::Error>) -> Result<Value> {
    let mut response = response.map_err(|error| format!("{path}: {error}"))?;
    let body: Value = response.body_mut().with_config().limit(64 << 20).read_json().map_err(words)?;
    let value = &body["value"];
    if response.status().is_success() {
        Ok(value.clone())
    } else {
        Err(format!("{path}: {} {}", value["error"], value["message"]))
    }
}
