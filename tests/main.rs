//! All checks in one program: published figures, laws, edges, journeys, files, demos, tidiness.

mod demos;
mod headless;
mod report;
mod tidy;
mod words;
