//! From a description to a complete build: each default, each origin, each refusal.

mod accessories;
mod connections;
mod defaults;
mod parts;
mod support;
mod whole;
mod windings;
