//! Shared pieces of the checks: the invented demonstration projects, made from seeds.

pub mod demos;
