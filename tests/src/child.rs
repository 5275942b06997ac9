//! Programs that the tests start, and that never outlive them.

use crate::{Result, words};
use std::fs::File;
use std::net::TcpListener;
use std::os::unix::fs::MetadataExt;
use std::os::unix::process::CommandExt;
use std::path::{Path, PathBuf};
use std::process::{self, Command, Stdio};
use std::sync::atomic::{AtomicU32, Ordering};
use std::time::{Duration, Instant};

/// The guard leads a process group in which the program runs, and reads from a pipe that only the test holds. The pipe
/// closes when the test drops it, and also when the test is killed: then the guard kills the group.
const GUARD: &str = r#"exec 3<&0; "$@" 3<&- </dev/null & cat <&3 >/dev/null; kill -s KILL -- -$$"#;

/// A program with everything it starts.
pub struct Child(process::Child);

impl Child {
    /// Starts `program`; what it says goes to `log`.
    pub fn start(program: &Command, log: &Path) -> Result<Child> {
        let log = File::create(log).map_err(words)?;
        let mut guard = Command::new("sh");
        guard.args(["-c", GUARD, "guard"]).arg(program.get_program()).args(program.get_args());
        for (name, value) in program.get_envs() {
            guard.env(name, value.unwrap_or_default());
        }
        guard.stdin(Stdio::piped()).stdout(log.try_clone().map_err(words)?).stderr(log);
        guard.process_group(0).spawn().map(Child).map_err(|error| format!("{program:?}: {error}"))
    }
}

impl Drop for Child {
    fn drop(&mut self) {
        drop(self.0.stdin.take());
        let _ = self.0.wait();
    }
}

/// A screen in memory, for a browser that has no headless mode or lacks the focus in it.
pub struct Display {
    /// What goes into DISPLAY.
    pub name: String,
    _server: Child,
}

impl Display {
    /// Starts it. Without a window manager the window under the pointer has the focus. The pointer stands in the middle of
    /// the screen, and that is within a browser's window at its narrowest.
    pub fn start(log: &Path) -> Result<Display> {
        let name = format!(":{}", free_port()?);
        let mut server = Command::new(find(&["Xvfb"])?);
        server.args([&name, "-screen", "0", "880x1000x24", "-nolisten", "tcp"]);
        let server = Child::start(&server, &log.with_extension("display.log"))?;
        let socket = PathBuf::from(format!("/tmp/.X11-unix/X{}", &name[1..]));
        let start = Instant::now();
        while !socket.exists() {
            if start.elapsed() > Duration::from_secs(20) {
                return Err("Xvfb does not start".to_owned());
            }
            std::thread::sleep(Duration::from_millis(10));
        }
        Ok(Display { name, _server: server })
    }
}

/// A folder of its own for a browser's data, gone with it.
pub struct Scratch(pub PathBuf);

impl Scratch {
    /// Makes the folder.
    pub fn new(name: &str) -> Result<Scratch> {
        static MADE: AtomicU32 = AtomicU32::new(0);
        let count = MADE.fetch_add(1, Ordering::Relaxed);
        let dir = std::env::temp_dir().join(format!("farstaff-{name}-{}-{count}", process::id()));
        let _ = std::fs::remove_dir_all(&dir);
        std::fs::create_dir_all(&dir).map_err(words)?;
        Ok(Scratch(dir))
    }
}

impl Drop for Scratch {
    fn drop(&mut self) {
        let _ = std::fs::remove_dir_all(&self.0);
    }
}

/// A port nobody listens on.
pub fn free_port() -> Result<u16> {
    let listener = TcpListener::bind("127.0.0.1:0").map_err(words)?;
    Ok(listener.local_addr().map_err(words)?.port())
}

/// Where one of these programs is; an absolute path or a name to be found.
pub fn find(names: &[&str]) -> Result<PathBuf> {
    let path = std::env::var_os("PATH").unwrap_or_default();
    // Joining an absolute path onto a folder gives that path.
    let places = names.iter().flat_map(|name| std::env::split_paths(&path).map(move |dir| dir.join(name)));
    places.into_iter().find(|place| place.is_file()).ok_or(format!("none of {names:?} is installed"))
}

/// Browsers refuse their sandbox to root.
pub fn is_root() -> bool {
    std::fs::metadata("/proc/self").is_ok_and(|own| own.uid() == 0)
}
