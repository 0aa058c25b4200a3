//! The harness of the test suites. Tests speak the language: a sheet, and what
//! is to be said of it. Only [`subject`] and [`compiled`] call
//! the crates under test.
//!
//! ```text
//!   sheets/**/*.zij      fixture     what is wrong, where, with which repair
//!   sessions/*.txt       exchange    what a user sees at the prompt
//!   published/*.toml     published   a value, against a paper or a standard
//! ```

pub mod compiled;
pub mod exchange;
pub mod fixture;
pub mod generate;
pub mod published;
pub mod repository;
pub mod subject;

pub use fixture::{check, check_dimension, check_fix, check_form};
