//! A folder to work in, and the program run in it.

use std::fs;
use std::io::Write;
use std::path::PathBuf;
use std::process::{Command, Output, Stdio};

use tempfile::TempDir;

/// An empty folder in which the program runs.
pub(crate) struct Bench {
    folder: TempDir,
}

impl Bench {
    pub(crate) fn new() -> Self {
        Self { folder: tempfile::tempdir().unwrap() }
    }

    /// A folder with one file in it.
    pub(crate) fn with(name: &str, content: impl AsRef<[u8]>) -> Self {
        let bench = Self::new();
        bench.put(name, content);
        bench
    }

    pub(crate) fn path(&self, name: &str) -> PathBuf {
        self.folder.path().join(name)
    }

    pub(crate) fn put(&self, name: &str, content: impl AsRef<[u8]>) {
        fs::write(self.path(name), content).unwrap();
    }

    pub(crate) fn get(&self, name: &str) -> String {
        fs::read_to_string(self.path(name)).unwrap()
    }

    /// The names of the files in the folder.
    pub(crate) fn files(&self) -> Vec<String> {
        let entries = fs::read_dir(self.folder.path()).unwrap();
        let mut names: Vec<String> = entries.map(|e| e.unwrap().file_name().into_string().unwrap()).collect();
        names.sort();
        names
    }

    /// The program with these arguments, ready to start in the folder.
    pub(crate) fn command(&self, arguments: &[&str]) -> Command {
        let mut command = Command::new(env!("CARGO_BIN_EXE_trysquare"));
        command.args(arguments).current_dir(self.folder.path()).env_remove("COLUMNS");
        command.stdin(Stdio::null()).stdout(Stdio::piped()).stderr(Stdio::piped());
        command
    }

    pub(crate) fn run(&self, arguments: &[&str]) -> Output {
        self.run_on(arguments, "")
    }

    pub(crate) fn run_on(&self, arguments: &[&str], stdin: &str) -> Output {
        let mut child = self.command(arguments).stdin(Stdio::piped()).spawn().unwrap();
        let mut input = child.stdin.take().unwrap();
        // A program that does not read its stdin may be gone already.
        let _ = input.write_all(stdin.as_bytes());
        drop(input);
        child.wait_with_output().unwrap()
    }

    /// Runs the program and shows everything a person sees.
    pub(crate) fn show(&self, arguments: &[&str]) -> String {
        shown(arguments, &self.run(arguments))
    }
}

pub(crate) fn code(output: &Output) -> i32 {
    output.status.code().unwrap()
}

pub(crate) fn stdout(output: &Output) -> &str {
    std::str::from_utf8(&output.stdout).unwrap()
}

pub(crate) fn stderr(output: &Output) -> &str {
    std::str::from_utf8(&output.stderr).unwrap()
}

/// The text with every time such as `0.3 ms` replaced by dots, as many as it has characters.
fn without_times(text: &str) -> String {
    let lines = text.split_inclusive('\n').map(|line| {
        if let Some((before, after)) = line.split_once("  took  ") {
            return format!("{before}  took  {}", after.trim_start());
        }
        let Some(end) = line.find(" ms ").map(|n| n + 3).or_else(|| line.find(" s  ").map(|n| n + 2)) else {
            return line.to_owned();
        };
        let unit = line[..end].rfind(' ').unwrap_or(0);
        let start = line[..unit].rfind(' ').map_or(0, |n| n + 1);
        let number = line[start..unit].parse::<f64>().is_ok();
        // A longer time takes the place of blanks.
        let rest = line[end..].trim_start();
        if number { format!("{}[time]  {rest}", &line[..start]) } else { line.to_owned() }
    });
    lines.collect()
}

/// Command line, exit code, stdout and stderr; the version and times left open.
pub(crate) fn shown(arguments: &[&str], output: &Output) -> String {
    let quoted: Vec<String> = arguments
        .iter()
        .map(|a| if a.contains(' ') || a.is_empty() { format!("\"{a}\"") } else { (*a).to_owned() })
        .collect();
    let mut text = format!("$ trysquare {}\nexit code {}\n", quoted.join(" "), code(output));
    for (title, stream) in [("stdout", stdout(output)), ("stderr", stderr(output))] {
        if !stream.is_empty() {
            text.push_str(&format!("--- {title}\n{stream}"));
        }
    }
    without_times(&text).replace(concat!("trysquare ", env!("CARGO_PKG_VERSION")), "trysquare [version]")
}
