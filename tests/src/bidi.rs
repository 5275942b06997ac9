//! Firefox by WebDriver BiDi, which it speaks itself: no driver to install.

use crate::child::{Child, Scratch, find, free_port};
use crate::socket::Socket;
use crate::{Result, words};
use serde_json::{Value, json};
use std::cell::RefCell;
use std::path::Path;
use std::process::Command;
use std::rc::Rc;
use std::time::{Duration, Instant};

/// No errand of its own, and no doubt about time.
const PREFERENCES: [(&str, &str); 7] = [
    ("app.update.enabled", "false"),
    ("browser.shell.checkDefaultBrowser", "false"),
    ("browser.startup.page", "0"),
    ("datareporting.policy.dataSubmissionEnabled", "false"),
    ("network.captive-portal-service.enabled", "false"),
    ("network.connectivity-service.enabled", "false"),
    ("privacy.reduceTimerPrecision", "false"),
];

/// A running Firefox with one tab.
pub struct Firefox {
    link: RefCell<Link>,
    tab: RefCell<String>,
    pub version: String,
    killed: bool,
    _browser: Child,
    _profile: Rc<Scratch>,
}

struct Link {
    socket: Socket,
    sent: u64,
}

impl Firefox {
    /// Starts it with a profile of ours.
    pub fn start(log: &Path, profile: Rc<Scratch>) -> Result<Firefox> {
        let port = free_port()?;
        let lines: String =
            PREFERENCES.iter().map(|(name, value)| format!("user_pref('{name}', {value});\n")).collect();
        std::fs::write(profile.0.join("user.js"), lines).map_err(words)?;
        let mut browser = Command::new(find(&["firefox-esr", "firefox"])?);
        browser.args(["--headless", "--no-remote", "--remote-allow-system-access", "--profile"]).arg(&profile.0);
        browser.arg(format!("--remote-debugging-port={port}")).arg("about:blank");
        let browser = Child::start(&browser, log)?;
        let start = Instant::now();
        let socket = loop {
            match Socket::connect(port, "/session") {
                Ok(socket) => break socket,
                Err(error) if start.elapsed() > Duration::from_secs(30) => return Err(words(error)),
                Err(_) => std::thread::sleep(Duration::from_millis(50)),
            }
        };
        let link = RefCell::new(Link { socket, sent: 0 });
        let (tab, version) = Default::default();
        let mut firefox = Firefox { link, tab, version, killed: false, _browser: browser, _profile: profile };
        let session = firefox.send("session.new", json!({ "capabilities": { "alwaysMatch": {} } }))?;
        firefox.version = format!("firefox {}", session["capabilities"]["browserVersion"]).replace('"', "");
        let tree = firefox.send("browsingContext.getTree", json!({}))?;
        firefox.tab = tree["contexts"][0]["context"].as_str().ok_or("no tab")?.to_owned().into();
        Ok(firefox)
    }

    /// Opens an address and gives the page the focus, as a tap would: otherwise the browser's own bar has it.
    pub fn go(&self, url: &str) -> Result<()> {
        self.tab("browsingContext.navigate", json!({ "url": url, "wait": "complete" }))?;
        let windows = self.send("browsingContext.getTree", json!({ "moz:scope": "chrome" }))?;
        let target = json!({ "context": windows["contexts"][0]["context"] });
        let focus = "gBrowser.selectedBrowser.focus(); 0";
        let params = json!({ "expression": focus, "target": target, "awaitPromise": false });
        self.send("script.evaluate", params).map(drop)
    }

    /// Opens a tab, closes the one there was.
    pub fn next_tab(&self) -> Result<()> {
        let opened = self.send("browsingContext.create", json!({ "type": "tab" }))?;
        let old = self.tab.replace(opened["context"].as_str().ok_or("no tab")?.to_owned());
        self.send("browsingContext.close", json!({ "context": old })).map(drop)
    }

    /// Kills it with everything it runs, without a word to it.
    pub fn kill(mut self) {
        self.killed = true;
    }

    /// Sends a command about the tab.
    pub fn tab(&self, method: &str, mut params: Value) -> Result<Value> {
        params["context"] = json!(*self.tab.borrow());
        self.send(method, params)
    }

    /// Runs an async function body in the page's own realm; what it returns passes through JSON.
    pub fn js(&self, body: &str) -> Result<Value> {
        let expression = format!("(async () => {{ {body} }})().then(v => JSON.stringify(v) ?? 'null')");
        let params =
            json!({ "expression": expression, "target": { "context": *self.tab.borrow() }, "awaitPromise": true });
        let said = self.send("script.evaluate", params)?;
        match said["type"].as_str() {
            Some("success") => serde_json::from_str(said["result"]["value"].as_str().unwrap_or("null")).map_err(words),
            _ => Err(said["exceptionDetails"]["text"].as_str().unwrap_or("the script failed").to_owned()),
        }
    }

    /// A handle of the first element that matches.
    pub fn element(&self, css: &str) -> Result<Value> {
        let params = json!({ "locator": { "type": "css", "value": css }, "maxNodeCount": 1 });
        let found = self.tab("browsingContext.locateNodes", params)?;
        let id = found["nodes"][0]["sharedId"].as_str().ok_or(format!("no element {css}"))?;
        Ok(json!({ "type": "element", "element": { "sharedId": id } }))
    }

    fn send(&self, method: &str, params: Value) -> Result<Value> {
        let link = &mut *self.link.borrow_mut();
        link.sent += 1;
        let command = json!({ "id": link.sent, "method": method, "params": params });
        link.socket.send(&command.to_string()).map_err(words)?;
        loop {
            let said: Value = serde_json::from_str(&link.socket.receive().map_err(words)?).map_err(words)?;
            if said["id"] == link.sent {
                let fine = said["type"] == "success";
                return if fine { Ok(said["result"].clone()) } else { Err(format!("{method}: {}", said["message"])) };
            }
        }
    }
}

impl Drop for Firefox {
    fn drop(&mut self) {
        // The guard kills what does not close by itself.
        if !self.killed {
            let _ = self.send("browser.close", json!({}));
        }
    }
}
