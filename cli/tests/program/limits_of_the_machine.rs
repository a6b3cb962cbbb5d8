//! Folders that cannot be written or are in use, and disks that are full.

use std::path::Path;
use std::process::Command;

use crate::harness::{COIL, Room};

#[test]
fn a_folder_that_cannot_be_made_is_known_before_the_solve() {
    let room = Room::with_case(COIL);
    room.write("taken", b"a file where a folder is wanted");
    let ran = room.run(&["solve", "case.toml", "--out", "taken/here"]);
    ran.assert_calm();
    assert_eq!(ran.status, 2, "{}", ran.err);
    assert!(ran.err.contains("taken"), "{}", ran.err);
    let ran = room.run(&["solve", "case.toml", "--out", "taken"]);
    ran.assert_calm();
    assert_eq!(ran.status, 2, "{}", ran.err);
    assert!(ran.err.contains("taken"), "{}", ran.err);
    assert_eq!(room.names(), ["case.toml", "taken"]);
}

#[test]
fn a_folder_without_write_permission_is_refused() {
    // Not even root may write in /proc.
    let ran = Room::with_case(COIL).run(&["solve", "case.toml", "--out", "/proc/coilwright"]);
    ran.assert_calm();
    assert_eq!(ran.status, 2, "{}", ran.err);
    assert!(ran.err.contains("/proc/coilwright"), "{}", ran.err);
}

#[test]
fn a_folder_in_use_is_refused_and_left_alone() {
    let room = Room::with_case(&format!(
        "{COIL}\n[accuracy]\ngoal = \"0.00001 %\"\nmax_triangles = 1000000\n"
    ));
    let mut first = room
        .command(&["solve", "case.toml", "--quiet", "--out", "shared"])
        .spawn()
        .unwrap();
    let deadline = std::time::Instant::now() + std::time::Duration::from_secs(20);
    while !room.path().join("shared").exists() {
        assert!(
            std::time::Instant::now() < deadline,
            "the first run made no folder"
        );
        std::thread::sleep(std::time::Duration::from_millis(5));
    }
    std::thread::sleep(std::time::Duration::from_millis(50));
    let ran = room.run(&["solve", "case.toml", "--out", "shared"]);
    let still_running = first.try_wait().unwrap().is_none();
    first.kill().unwrap();
    first.wait().unwrap();
    assert!(still_running, "the first run ended too early for this test");
    ran.assert_calm();
    assert_eq!(ran.status, 2, "{}", ran.err);
    assert!(
        ran.err.contains("shared") && ran.err.contains("in use"),
        "{}",
        ran.err
    );
    // Its owner was killed: the folder is free again.
    room.write("case.toml", COIL.as_bytes());
    assert_eq!(
        room.run(&["solve", "case.toml", "--out", "shared", "--quiet"])
            .status,
        0
    );
}

/// A file system of `size` bytes, taken away at the end.
struct SmallDisk<'a>(&'a Path);

impl<'a> SmallDisk<'a> {
    /// `None` where this user may not mount.
    fn mount(at: &'a Path, size: &str) -> Option<Self> {
        std::fs::create_dir_all(at).unwrap();
        let mut mount = Command::new("mount");
        mount
            .args(["-t", "tmpfs", "-o", &format!("size={size}"), "tmpfs"])
            .arg(at);
        mount
            .output()
            .ok()
            .filter(|output| output.status.success())
            .map(|_| Self(at))
    }
}

impl Drop for SmallDisk<'_> {
    fn drop(&mut self) {
        let _ = Command::new("umount").arg(self.0).output();
    }
}

#[test]
fn a_full_disk_ends_with_1_in_words_and_leaves_no_half_file() {
    let room = Room::with_case(COIL);
    let at = room.path().join("disk");
    let Some(_disk) = SmallDisk::mount(&at, "64k") else {
        println!("skipped: this user may not mount a small file system to fill");
        return;
    };
    let ran = room.run(&["solve", "case.toml", "--out", "disk/out"]);
    ran.assert_calm();
    assert_eq!(ran.status, 1, "{}", ran.err);
    assert!(
        ran.err.contains("disk/out") && ran.err.to_lowercase().contains("space"),
        "{}",
        ran.err
    );
    let left = std::fs::read_dir(at.join("out")).map(|entries| {
        entries
            .map(|entry| entry.unwrap().file_name().to_string_lossy().into_owned())
            .collect::<Vec<_>>()
    });
    assert!(
        !left.unwrap_or_default().contains(&"field.vtu".to_string()),
        "a file appears whole or not at all"
    );
}

#[test]
fn a_full_standard_output_ends_with_1_in_words() {
    let Ok(full) = std::fs::OpenOptions::new().write(true).open("/dev/full") else {
        println!("skipped: no /dev/full here");
        return;
    };
    let room = Room::with_case(COIL);
    let output = room
        .command(&["solve", "case.toml", "--json"])
        .stdout(full)
        .output()
        .unwrap();
    let err = String::from_utf8(output.stderr).unwrap();
    assert_eq!(output.status.code(), Some(1), "{err}");
    assert!(
        err.to_lowercase().contains("space") && !err.contains("panicked"),
        "{err}"
    );
}
