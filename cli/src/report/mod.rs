//! What a solve tells: one shape for scripts ([`json`]), the same numbers for people ([`text`]), and traverses as
//! tables ([`table`]).

pub mod json;
mod named;
pub mod plots;
pub mod table;
pub mod text;

pub use json::Report;
pub use named::Named;
