//! Bytes in, bytes out: project file, delimited text, report.

pub mod fit_json;
pub mod intake;
pub mod report;
pub mod table;
pub mod verify;
