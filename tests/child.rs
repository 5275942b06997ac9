//! What a test starts dies with it.

use farstaff_tests::child::{Child, Scratch};
use std::process::Command;
use std::time::{Duration, Instant};

/// How many programs run that hold this word in their command line.
fn running(word: &str) -> usize {
    let programs = std::fs::read_dir("/proc").expect("Linux").flatten();
    programs
        .filter(|program| std::fs::read(program.path().join("cmdline")).is_ok_and(|line| holds(&line, word)))
        .count()
}

fn holds(line: &[u8], word: &str) -> bool {
    line.split(|byte| *byte == 0).any(|argument| argument == word.as_bytes())
}

fn wait_for(count: usize, word: &str) {
    let start = Instant::now();
    while running(word) != count {
        assert!(start.elapsed() < Duration::from_secs(10), "{} run, wanted {count}", running(word));
        std::thread::sleep(Duration::from_millis(10));
    }
}

#[test]
fn a_child_dies_with_the_children_it_has() {
    let scratch = Scratch::new("child").expect("a folder");
    // The time is the mark by which they are found.
    let time = format!("600.{}", std::process::id());
    let mut nest = Command::new("sh");
    nest.args(["-c", "sleep $0 & sleep $0; true", &time]);
    let child = Child::start(&nest, &scratch.0.join("log")).expect("it starts");
    // The guard, the shell and its two children.
    wait_for(4, &time);
    drop(child);
    wait_for(0, &time);
}
