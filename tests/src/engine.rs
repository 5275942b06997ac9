//! One face for the three engines.

use crate::bidi::Firefox;
use crate::child::Scratch;
use crate::webdriver::Session;
use crate::{Result, words};
use base64::{Engine as _, prelude::BASE64_STANDARD};
use serde_json::{Value, json};
use std::fmt::{self, Display, Formatter};
use std::path::Path;
use std::rc::Rc;
use std::time::{Duration, Instant};

/// Name by which WebDriver marks a handle of an element.
const ELEMENT: &str = "element-6066-11e4-a52e-4f735466cecf";

/// Longer than the halves of a double tap lie apart.
const BETWEEN_TAPS: Duration = Duration::from_millis(400);

/// How long anything may take that is waited for.
const PATIENCE: Duration = Duration::from_secs(20);

/// The engines under the phones' browsers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Engine {
    Chromium,
    Firefox,
    WebKit,
}

impl Engine {
    pub const ALL: [Engine; 3] = [Engine::Chromium, Engine::Firefox, Engine::WebKit];

    /// Starts it with nothing remembered.
    pub fn start(self, log: &Path) -> Result<Browser> {
        self.start_with(log, &Rc::new(Scratch::new(&self.to_string())?))
    }

    /// Starts it with what it remembers in `profile`.
    pub fn start_with(self, log: &Path, profile: &Rc<Scratch>) -> Result<Browser> {
        let profile = profile.clone();
        Ok(match self {
            Engine::Chromium => Browser::Chromium(Session::chromium(log, profile)?),
            Engine::Firefox => Browser::Firefox(Firefox::start(log, profile)?),
            Engine::WebKit => Browser::WebKit(Session::webkit(log, profile)?),
        })
    }
}

impl Display for Engine {
    fn fmt(&self, f: &mut Formatter) -> fmt::Result {
        f.write_str(match self {
            Engine::Chromium => "chromium",
            Engine::Firefox => "firefox",
            Engine::WebKit => "webkit",
        })
    }
}

/// A key that is no character, by the number WebDriver gives it.
#[derive(Debug, Clone, Copy)]
pub enum Key {
    Tab = 0xE004,
    Enter = 0xE006,
    Home = 0xE011,
    Right = 0xE014,
    Up = 0xE013,
}

/// A running browser.
pub enum Browser {
    Chromium(Session),
    Firefox(Firefox),
    WebKit(Session),
}
use Browser::{Chromium, WebKit};

impl Browser {
    /// Which engine it is.
    pub fn engine(&self) -> Engine {
        match self {
            Chromium(_) => Engine::Chromium,
            Browser::Firefox(_) => Engine::Firefox,
            WebKit(_) => Engine::WebKit,
        }
    }

    /// Name and version.
    pub fn version(&self) -> &str {
        match self {
            Chromium(session) | WebKit(session) => &session.version,
            Browser::Firefox(firefox) => &firefox.version,
        }
    }

    /// Opens a tab, closes the one there was.
    pub fn next_tab(&self) -> Result<()> {
        match self {
            Chromium(session) | WebKit(session) => session.next_tab(),
            Browser::Firefox(firefox) => firefox.next_tab(),
        }
    }

    /// Kills it with everything it runs, without a word to it.
    pub fn kill(self) {
        match self {
            Chromium(session) | WebKit(session) => session.kill(),
            Browser::Firefox(firefox) => firefox.kill(),
        }
    }

    /// A command of Chromium's own protocol.
    pub fn cdp(&self, command: &str, params: Value) -> Result<Value> {
        match self {
            Chromium(session) => session.cdp(command, params),
            _ => Err(format!("only Chromium knows {command}")),
        }
    }

    /// Opens an address.
    pub fn go(&self, url: &str) -> Result<()> {
        match self {
            Chromium(session) | WebKit(session) => session.post("url", json!({ "url": url })).map(drop),
            Browser::Firefox(firefox) => firefox.go(url),
        }
    }

    /// Loads the page again.
    pub fn reload(&self) -> Result<()> {
        match self {
            Chromium(session) | WebKit(session) => session.post("refresh", json!({})),
            Browser::Firefox(firefox) => firefox.tab("browsingContext.reload", json!({ "wait": "complete" })),
        }
        .map(drop)
    }

    /// Runs an async function body in the page; what it returns passes through JSON.
    pub fn js(&self, body: &str) -> Result<Value> {
        match self {
            Chromium(session) | WebKit(session) => session.js(body),
            Browser::Firefox(firefox) => firefox.js(body),
        }
    }

    /// Waits until an expression holds in the page.
    pub fn wait(&self, condition: &str) -> Result<()> {
        let start = Instant::now();
        let body = format!("return !!({condition})");
        loop {
            // A page that is just being left cannot answer.
            let now = self.js(&body);
            if now == Ok(json!(true)) {
                return Ok(());
            }
            if start.elapsed() > PATIENCE {
                let shown = self.js("return document.body?.innerText.slice(0, 300)");
                return Err(format!("waited in vain for {condition}: {now:?}, on {shown:?}"));
            }
            std::thread::sleep(Duration::from_millis(30));
        }
    }

    /// Text of the first element that matches.
    pub fn text(&self, css: &str) -> Result<String> {
        let found = self.js(&format!("return document.querySelector({})?.innerText", json!(css)))?;
        found.as_str().map(str::to_owned).ok_or(format!("no element {css}"))
    }

    /// Taps the middle of an element, as a finger does where the engine's driver has fingers. Like a finger it first
    /// moves the page until the element lies free: a driver alone leaves it under the bar at the top.
    pub fn tap(&self, css: &str) -> Result<()> {
        let scroll =
            format!("document.querySelector({})?.scrollIntoView({{ block: 'center' }}); return 0;", json!(css));
        self.js(&scroll)?;
        // Two quick taps on the same place of the screen would be a double tap.
        std::thread::sleep(BETWEEN_TAPS);
        // What came into view has taken its own height, and may have moved the element away again.
        self.js(&scroll)?;
        self.js("globalThis.tapped = false;
            addEventListener('click', () => { globalThis.tapped = true; }, { capture: true, once: true }); return 0;")?;
        let touch = |origin: Value| {
            let moves = json!([
                { "type": "pointerMove", "x": 0, "y": 0, "origin": origin },
                { "type": "pointerDown", "button": 0 },
                { "type": "pointerUp", "button": 0 },
            ]);
            let finger = json!({ "pointerType": "touch" });
            json!({ "actions": [{ "type": "pointer", "id": "finger", "parameters": finger, "actions": moves }] })
        };
        match self {
            Chromium(session) => session.post("actions", touch(json!({ ELEMENT: session.element(css)? }))),
            Browser::Firefox(firefox) => firefox.tab("input.performActions", touch(firefox.element(css)?)),
            // Its driver has no fingers.
            WebKit(session) => session.post(&format!("element/{}/click", session.element(css)?), json!({})),
        }?;
        // What a finger does takes effect a moment later. On a page that has been left by it nothing is known any more.
        self.wait("globalThis.tapped !== false").map_err(|error| format!("the tap on {css} was no click: {error}"))
    }

    /// Types a text key by key, wherever the focus is.
    pub fn keys(&self, text: &str) -> Result<()> {
        let strokes: Vec<Value> = text
            .chars()
            .flat_map(|key| ["keyDown", "keyUp"].map(|kind| json!({ "type": kind, "value": key.to_string() })))
            .collect();
        let actions = json!({ "actions": [{ "type": "key", "id": "keys", "actions": strokes }] });
        match self {
            Chromium(session) | WebKit(session) => session.post("actions", actions),
            Browser::Firefox(firefox) => firefox.tab("input.performActions", actions),
        }
        .map(drop)
    }

    /// Presses one key.
    pub fn key(&self, key: Key) -> Result<()> {
        self.keys(&char::from_u32(key as u32).ok_or("no such key")?.to_string())
    }

    /// Taps a field, takes what stands in it and types over it.
    pub fn enter(&self, css: &str, text: &str) -> Result<()> {
        self.tap(css)?;
        self.js(&format!("document.querySelector({}).select()", json!(css)))?;
        self.keys(text)
    }

    /// Gives the page a size in CSS pixels and says which width it got: WebKit's window stops at 447.
    pub fn viewport(&self, width: u32, height: u32) -> Result<u64> {
        match self {
            Chromium(session) => {
                let size = json!({ "width": width, "height": height, "deviceScaleFactor": 2, "mobile": true });
                session.cdp("Emulation.setDeviceMetricsOverride", size)?;
                session.cdp("Emulation.setTouchEmulationEnabled", json!({ "enabled": true }))
            }
            WebKit(session) => session.post("window/rect", json!({ "width": width, "height": height })),
            Browser::Firefox(firefox) => {
                let size = json!({ "width": width, "height": height });
                firefox.tab("browsingContext.setViewport", json!({ "viewport": size, "devicePixelRatio": 2 }))
            }
        }?;
        self.js("return innerWidth")?.as_u64().ok_or("no width".to_owned())
    }

    /// Saves a picture of the page.
    pub fn screenshot(&self, to: &Path) -> Result<()> {
        let picture = match self {
            Chromium(session) | WebKit(session) => session.get("screenshot")?,
            Browser::Firefox(firefox) => firefox.tab("browsingContext.captureScreenshot", json!({}))?["data"].take(),
        };
        save(&picture, to)
    }

    /// Saves a picture of the whole page, where the engine's driver can: else of what is in view.
    pub fn screenshot_whole(&self, to: &Path) -> Result<()> {
        let picture = match self {
            Chromium(session) => {
                let mut clip = session.cdp("Page.getLayoutMetrics", json!({}))?["cssContentSize"].take();
                clip["scale"] = json!(1);
                let params = json!({ "captureBeyondViewport": true, "clip": clip });
                session.cdp("Page.captureScreenshot", params)?["data"].take()
            }
            Browser::Firefox(firefox) => {
                firefox.tab("browsingContext.captureScreenshot", json!({ "origin": "document" }))?["data"].take()
            }
            WebKit(session) => session.get("screenshot")?,
        };
        save(&picture, to)
    }

    /// Prints the page into a PDF; WebKit's driver cannot.
    pub fn print(&self, to: &Path) -> Result<()> {
        let paper = match self {
            Chromium(session) => session.post("print", json!({}))?,
            Browser::Firefox(firefox) => firefox.tab("browsingContext.print", json!({}))?["data"].take(),
            WebKit(_) => return Err("WebKit's driver does not print".to_owned()),
        };
        save(&paper, to)
    }
}

fn save(base64: &Value, to: &Path) -> Result<()> {
    let bytes = BASE64_STANDARD.decode(base64.as_str().ok_or("nothing came")?).map_err(words)?;
    std::fs::write(to, bytes).map_err(words)
}
