//! A folder of its own for each test, and the program run in it.

use std::ffi::OsStr;
use std::io::Write as _;
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};

use serde_json::Value;
use tempfile::TempDir;

/// A small case that solves in a blink: one coil of 10 turns and 1 A.
pub const COIL: &str = r#"title = "One coil"

[given]
turns = 10
outer = "30 mm"

[[region]]
name = "coil"
material = "copper"
rect = { r = [20, "outer"], z = [-5, 5] }

[[winding]]
name = "main"
regions = ["coil"]
turns = "turns"
current = "1 A"
"#;

/// A folder with case files in it.
pub struct Room {
    folder: TempDir,
}

/// What the program did.
pub struct Ran {
    pub status: i32,
    pub out: String,
    pub err: String,
}

impl Room {
    /// An empty folder.
    pub fn new() -> Self {
        Self {
            folder: TempDir::new().unwrap(),
        }
    }

    /// A folder with `case.toml` in it.
    pub fn with_case(text: &str) -> Self {
        let room = Self::new();
        room.write("case.toml", text.as_bytes());
        room
    }

    pub fn path(&self) -> &Path {
        self.folder.path()
    }

    pub fn write(&self, name: &str, bytes: &[u8]) -> PathBuf {
        let path = self.path().join(name);
        std::fs::write(&path, bytes).unwrap();
        path
    }

    /// Names of all files and folders in it, sorted.
    pub fn names(&self) -> Vec<String> {
        let entries = std::fs::read_dir(self.path()).unwrap();
        let mut names: Vec<String> = entries
            .map(|entry| entry.unwrap().file_name().to_string_lossy().into_owned())
            .collect();
        names.sort();
        names
    }

    /// The program, ready to be run in this folder with colours off.
    pub fn command<S: AsRef<OsStr>>(&self, arguments: &[S]) -> Command {
        let mut command = Command::new(env!("CARGO_BIN_EXE_coilwright"));
        command
            .args(arguments)
            .current_dir(self.path())
            .env("NO_COLOR", "1")
            .stdin(Stdio::null());
        command
    }

    pub fn run<S: AsRef<OsStr>>(&self, arguments: &[S]) -> Ran {
        Ran::from(self.command(arguments).output().unwrap())
    }

    /// Runs with `input` on standard input.
    pub fn run_with_input<S: AsRef<OsStr>>(&self, arguments: &[S], input: &[u8]) -> Ran {
        let mut command = self.command(arguments);
        command
            .stdin(Stdio::piped())
            .stdout(Stdio::piped())
            .stderr(Stdio::piped());
        let mut child = command.spawn().unwrap();
        // The program may stop reading early; a broken pipe is its right.
        let _ = child.stdin.take().unwrap().write_all(input);
        Ran::from(child.wait_with_output().unwrap())
    }

    /// Solves `case.toml` and parses the JSON; the run must end with status 0 and a silent standard error.
    pub fn solve_json(&self, more: &[&str]) -> Value {
        let mut arguments = vec!["solve", "case.toml", "--json"];
        arguments.extend(more);
        let ran = self.run(&arguments);
        assert_eq!((ran.status, ran.err.as_str()), (0, ""), "{}", ran.out);
        serde_json::from_str(&ran.out).unwrap()
    }
}

impl From<Output> for Ran {
    fn from(output: Output) -> Self {
        Self {
            status: output.status.code().expect("ended by a signal"),
            out: String::from_utf8(output.stdout).unwrap(),
            err: String::from_utf8(output.stderr).unwrap(),
        }
    }
}

impl Ran {
    /// Never a panic message, whatever else.
    pub fn assert_calm(&self) {
        for text in [&self.out, &self.err] {
            assert!(
                !text.contains("panicked") && !text.contains("RUST_BACKTRACE"),
                "{text}"
            );
        }
    }
}

/// A number at a path of keys: `[.., "value"]` is added by the caller.
pub fn number(json: &Value, pointer: &str) -> f64 {
    json.pointer(pointer)
        .and_then(Value::as_f64)
        .unwrap_or_else(|| panic!("no number at {pointer}: {json:#}"))
}
