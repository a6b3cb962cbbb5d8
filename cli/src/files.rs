//! Files that appear whole or not at all, in a folder that one run at a time uses.

use std::fs::{self, File, OpenOptions};
use std::io::{self, Write};
use std::path::{Path, PathBuf};

use tempfile::NamedTempFile;
use thiserror::Error;

/// Name of the lock file in an output folder.
const LOCK_NAME: &str = ".coilwright-in-use";

/// Why a folder cannot be used; known before anything is solved.
#[derive(Debug, Error)]
pub enum FolderError {
    /// It cannot be made.
    #[error("the output folder `{}` cannot be made: {cause}", path.display())]
    CannotMake {
        /// The folder.
        path: PathBuf,
        /// Why.
        cause: io::Error,
    },
    /// Nothing can be written into it.
    #[error("the output folder `{}` cannot be written to: {cause}", path.display())]
    CannotWrite {
        /// The folder.
        path: PathBuf,
        /// Why.
        cause: io::Error,
    },
    /// Another run holds it.
    #[error("the output folder `{}` is in use by another run of coilwright; wait for it or give another --out", path.display())]
    InUse {
        /// The folder.
        path: PathBuf,
    },
}

/// A file that could not be written; nothing of it is left.
#[derive(Debug, Error)]
#[error("`{}` cannot be written: {cause}", path.display())]
pub struct WriteError {
    /// The file.
    pub path: PathBuf,
    /// Why.
    pub cause: io::Error,
}

/// An output folder, made if need be, found writable, and locked against other runs until dropped.
#[derive(Debug)]
pub struct OutputFolder {
    path: PathBuf,
    lock: File,
    made_here: bool,
}

impl OutputFolder {
    /// Makes the folder, locks it, and tries to write into it.
    pub fn open(path: &Path) -> Result<Self, FolderError> {
        let made_here = !path.exists();
        fs::create_dir_all(path).map_err(|cause| FolderError::CannotMake {
            path: path.to_owned(),
            cause,
        })?;
        let lock = lock(path)?;
        let folder = Self {
            path: path.to_owned(),
            lock,
            made_here,
        };
        // A byte on the disk tells more than permissions do.
        stage(path, b"\n").map_err(|cause| FolderError::CannotWrite {
            path: path.to_owned(),
            cause,
        })?;
        Ok(folder)
    }

    /// Where it is.
    pub fn path(&self) -> &Path {
        &self.path
    }

    /// Starts a set of files that is published together.
    pub fn batch(&self) -> Batch<'_> {
        Batch {
            folder: &self.path,
            staged: Vec::new(),
        }
    }
}

impl Drop for OutputFolder {
    fn drop(&mut self) {
        // Removed while still locked; `lock` checks that the file it locked is still the one in the folder.
        let _ = fs::remove_file(self.path.join(LOCK_NAME));
        let _ = self.lock.unlock();
        if self.made_here {
            // Succeeds only when nothing was written.
            let _ = fs::remove_dir(&self.path);
        }
    }
}

/// Locks the folder's lock file.
fn lock(folder: &Path) -> Result<File, FolderError> {
    let path = folder.join(LOCK_NAME);
    let cannot = |cause| FolderError::CannotWrite {
        path: folder.to_owned(),
        cause,
    };
    // Another run may remove the file between our opening and locking it; then we hold a lock nobody can see.
    for _ in 0..100 {
        let file = OpenOptions::new()
            .create(true)
            .truncate(false)
            .write(true)
            .open(&path)
            .map_err(cannot)?;
        match file.try_lock() {
            Ok(()) if is_same_file(&file, &path) => return Ok(file),
            Ok(()) => {}
            Err(fs::TryLockError::WouldBlock) => {
                return Err(FolderError::InUse {
                    path: folder.to_owned(),
                });
            }
            Err(fs::TryLockError::Error(cause)) if cause.kind() == io::ErrorKind::Unsupported => {
                return Ok(file);
            }
            Err(fs::TryLockError::Error(cause)) => return Err(cannot(cause)),
        }
    }
    Err(FolderError::InUse {
        path: folder.to_owned(),
    })
}

#[cfg(unix)]
fn is_same_file(file: &File, path: &Path) -> bool {
    use std::os::unix::fs::MetadataExt;
    match (file.metadata(), fs::metadata(path)) {
        (Ok(ours), Ok(there)) => ours.dev() == there.dev() && ours.ino() == there.ino(),
        _ => false,
    }
}

#[cfg(not(unix))]
fn is_same_file(_: &File, path: &Path) -> bool {
    path.exists()
}

/// Files written in full beside their final places, and given their names together.
#[derive(Debug)]
pub struct Batch<'a> {
    folder: &'a Path,
    staged: Vec<(NamedTempFile, PathBuf)>,
}

impl Batch<'_> {
    /// Writes a file to the disk under a passing name.
    pub fn stage(&mut self, name: &str, bytes: &[u8]) -> Result<(), WriteError> {
        let path = self.folder.join(name);
        match stage(self.folder, bytes) {
            Ok(file) => {
                self.staged.push((file, path));
                Ok(())
            }
            Err(cause) => Err(WriteError { path, cause }),
        }
    }

    /// Gives all files their names, in the order they were staged; returns where they are.
    pub fn publish(self) -> Result<Vec<PathBuf>, WriteError> {
        let mut paths = Vec::new();
        for (file, path) in self.staged {
            file.persist(&path).map_err(|error| WriteError {
                path: path.clone(),
                cause: error.error,
            })?;
            paths.push(path);
        }
        Ok(paths)
    }
}

/// Writes one file, whole or not at all.
pub fn write_whole(path: &Path, bytes: &[u8]) -> Result<(), WriteError> {
    let folder = match path.parent() {
        Some(parent) if !parent.as_os_str().is_empty() => parent,
        _ => Path::new("."),
    };
    let wrong = |cause| WriteError {
        path: path.to_owned(),
        cause,
    };
    let file = stage(folder, bytes).map_err(wrong)?;
    file.persist(path).map(|_| ()).map_err(|error| wrong(error.error))
}

/// A passing file in the folder with these bytes on the disk; it is removed when dropped.
fn stage(folder: &Path, bytes: &[u8]) -> io::Result<NamedTempFile> {
    let mut builder = tempfile::Builder::new();
    builder.prefix(".coilwright-");
    #[cfg(unix)]
    {
        use std::os::unix::fs::PermissionsExt;
        // As any new file, subject to the umask; the library's own choice is for secrets.
        builder.permissions(fs::Permissions::from_mode(0o666));
    }
    let mut file = builder.tempfile_in(folder)?;
    file.write_all(bytes)?;
    file.as_file().sync_all()?;
    Ok(file)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn names(folder: &Path) -> Vec<String> {
        let mut names: Vec<String> = fs::read_dir(folder)
            .unwrap()
            .map(|entry| entry.unwrap().file_name().to_string_lossy().into_owned())
            .collect();
        names.sort();
        names
    }

    #[test]
    fn files_appear_together_when_published() {
        let parent = tempfile::tempdir().unwrap();
        let path = parent.path().join("a/b.out");
        let folder = OutputFolder::open(&path).unwrap();
        let mut batch = folder.batch();
        batch.stage("one.txt", b"1").unwrap();
        batch.stage("two.txt", b"2").unwrap();
        assert!(!path.join("one.txt").exists() && !path.join("two.txt").exists());
        assert_eq!(
            batch.publish().unwrap(),
            [path.join("one.txt"), path.join("two.txt")]
        );
        drop(folder);
        assert_eq!(names(&path), ["one.txt", "two.txt"]);
        assert_eq!(fs::read(path.join("two.txt")).unwrap(), b"2");
    }

    #[test]
    fn an_abandoned_batch_leaves_nothing_and_keeps_the_old_files() {
        let parent = tempfile::tempdir().unwrap();
        let path = parent.path().join("out");
        fs::create_dir(&path).unwrap();
        fs::write(path.join("one.txt"), "old").unwrap();
        let folder = OutputFolder::open(&path).unwrap();
        let mut batch = folder.batch();
        batch.stage("one.txt", b"new").unwrap();
        drop(batch);
        drop(folder);
        assert_eq!(names(&path), ["one.txt"]);
        assert_eq!(fs::read(path.join("one.txt")).unwrap(), b"old");
    }

    #[test]
    fn a_folder_made_for_nothing_is_removed() {
        let parent = tempfile::tempdir().unwrap();
        let path = parent.path().join("out");
        drop(OutputFolder::open(&path).unwrap());
        assert!(!path.exists());
    }

    #[test]
    fn a_folder_in_use_is_refused_until_it_is_free() {
        let parent = tempfile::tempdir().unwrap();
        let path = parent.path().join("out");
        let first = OutputFolder::open(&path).unwrap();
        assert!(matches!(
            OutputFolder::open(&path),
            Err(FolderError::InUse { .. })
        ));
        drop(first);
        assert!(OutputFolder::open(&path).is_ok());
    }

    #[test]
    fn a_folder_that_cannot_be_made_is_refused() {
        let parent = tempfile::tempdir().unwrap();
        let file = parent.path().join("file");
        fs::write(&file, "x").unwrap();
        let error = OutputFolder::open(&file.join("out")).unwrap_err();
        assert!(error.to_string().contains("cannot be made"), "{error}");
    }

    #[cfg(target_os = "linux")]
    #[test]
    fn a_file_that_cannot_be_written_is_named() {
        let error = write_whole(Path::new("/proc/picture.svg"), b"x").unwrap_err();
        assert!(
            error
                .to_string()
                .starts_with("`/proc/picture.svg` cannot be written: "),
            "{error}"
        );
    }

    #[cfg(unix)]
    #[test]
    fn files_are_readable_as_any_new_file() {
        use std::os::unix::fs::PermissionsExt;
        let parent = tempfile::tempdir().unwrap();
        fs::write(parent.path().join("plain"), "x").unwrap();
        write_whole(&parent.path().join("ours"), b"x").unwrap();
        let mode = |name: &str| {
            fs::metadata(parent.path().join(name))
                .unwrap()
                .permissions()
                .mode()
        };
        assert_eq!(mode("ours"), mode("plain"));
    }
}
