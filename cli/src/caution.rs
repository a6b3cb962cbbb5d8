//! Safety and validity remarks raised from the numbers.

/// One remark.
#[derive(Clone, Debug, PartialEq, Eq, serde::Serialize)]
pub struct Caution {
    /// What it is about: a winding's, region's or mover's name, or a subject such as `stray field`.
    pub about: String,
    /// The remark, in plain words.
    pub text: String,
    /// The standard it rests on, or `common practice, no source`, with `from memory` where it is.
    pub source: String,
}
