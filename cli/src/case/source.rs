//! Where a case file comes from, and its text, read within limits.

use std::io::Read;
use std::path::{Path, PathBuf};
use std::sync::Arc;

use super::fault::{Fault, Place};

/// Largest case file that is read, bytes.
pub const LARGEST_CASE_BYTES: usize = 16 * 1024 * 1024;

/// Where a case file comes from.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Source {
    /// A file.
    File(PathBuf),
    /// Standard input.
    StandardInput,
    /// A text that the caller holds already.
    Text {
        /// What messages call it.
        name: String,
        /// The text.
        text: String,
        /// Folder that paths in the case are relative to.
        folder: PathBuf,
    },
}

/// A named text that messages point into.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct SourceText {
    /// File name as given, `standard input`, or `--set NAME`.
    pub name: String,
    /// The text.
    pub text: String,
}

impl Source {
    /// The source meant by the command-line argument CASE: `-` is standard input, all else a path.
    pub fn from_argument(argument: &Path) -> Self {
        if argument.as_os_str() == "-" {
            Self::StandardInput
        } else {
            Self::File(argument.to_path_buf())
        }
    }

    /// What messages call it.
    pub fn name(&self) -> String {
        match self {
            Self::File(path) => path.display().to_string(),
            Self::StandardInput => "standard input".to_owned(),
            Self::Text { name, .. } => name.clone(),
        }
    }

    /// Name for files: the case file's stem, or `case` where there is no file.
    pub fn stem(&self) -> String {
        let stem = match self {
            Self::File(path) => path.file_stem().map(|stem| stem.to_string_lossy().into_owned()),
            Self::StandardInput => None,
            Self::Text { name, .. } => Path::new(name)
                .file_stem()
                .map(|stem| stem.to_string_lossy().into_owned()),
        };
        stem.unwrap_or_else(|| "case".to_owned())
    }

    /// Folder that paths in the case are relative to.
    pub fn folder(&self) -> PathBuf {
        match self {
            Self::File(path) => path.parent().map(Path::to_path_buf).unwrap_or_default(),
            Self::StandardInput => PathBuf::new(),
            Self::Text { folder, .. } => folder.clone(),
        }
    }

    /// Reads the whole text.
    ///
    /// # Errors
    /// A fault when it cannot be opened or read, is larger than [`LARGEST_CASE_BYTES`] (no more than that is
    /// read), or is not UTF-8.
    pub fn read(&self) -> Result<Arc<SourceText>, Fault> {
        let name = self.name();
        let bytes = match self {
            Self::File(path) => {
                let file = std::fs::File::open(path).map_err(|error| {
                    Fault::unplaced(format!("the case file `{name}` cannot be opened: {error}"))
                })?;
                if file.metadata().is_ok_and(|about| about.is_dir()) {
                    return Err(Fault::unplaced(format!("`{name}` is a folder, not a case file")));
                }
                read_within_limit(file, &name)?
            }
            Self::StandardInput => read_within_limit(std::io::stdin().lock(), &name)?,
            Self::Text { text, .. } => read_within_limit(text.as_bytes(), &name)?,
        };
        decode(name, bytes)
    }
}

/// Reads at most the allowed number of bytes (and one more, to see that there is more).
fn read_within_limit(reader: impl Read, name: &str) -> Result<Vec<u8>, Fault> {
    let mut bytes = Vec::new();
    reader
        .take(LARGEST_CASE_BYTES as u64 + 1)
        .read_to_end(&mut bytes)
        .map_err(|error| Fault::unplaced(format!("`{name}` cannot be read: {error}")))?;
    if bytes.len() > LARGEST_CASE_BYTES {
        let limit = LARGEST_CASE_BYTES / (1024 * 1024);
        return Err(Fault::unplaced(format!(
            "`{name}` is larger than {limit} MiB, the most a case file may have"
        ))
        .with_help("a case file is a few kilobytes of text; is this the right file?"));
    }
    Ok(bytes)
}

/// Turns bytes into text, naming the first byte that is not UTF-8.
fn decode(name: String, bytes: Vec<u8>) -> Result<Arc<SourceText>, Fault> {
    match String::from_utf8(bytes) {
        Ok(text) => Ok(Arc::new(SourceText { name, text })),
        Err(error) => {
            let at = error.utf8_error().valid_up_to();
            let bytes = error.into_bytes();
            let byte = bytes.get(at).copied().unwrap_or_default();
            // Up to the bad byte the lossy text is the same, so positions agree; it is replaced by one character.
            let text = String::from_utf8_lossy(&bytes).into_owned();
            let end = (at + char::REPLACEMENT_CHARACTER.len_utf8()).min(text.len());
            let source = Arc::new(SourceText { name, text });
            let place = Place {
                source,
                span: at..end,
            };
            let (line, column) = place.line_column();
            Err(Fault::new(
                format!("not UTF-8 text: byte {byte:#04x} in line {line}, column {column}"),
                place,
            )
            .with_label("this byte")
            .with_help("save the file as UTF-8 (it may be in an older character set or in UTF-16)"))
        }
    }
}
