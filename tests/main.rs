//! All checks in one program: published figures, laws, edges, journeys, files, demos, tidiness.

mod coverage;
mod demos;
mod headless;
mod report;
mod tidy;
mod words;
