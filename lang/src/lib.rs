//! The zij language.
//!
//! ```text
//!  text --lexer--> tokens --parser--> Ast --checker--> Program --evaluator--> values
//!  source          token              ast   check      program   eval         report
//!                                            |
//!                                   the library's catalogue
//! ```
//!
//! Lexer, parser and checker return what they understood together with every
//! diagnostic; only evaluation can fail outright. The checker is the one
//! bridge from the tree to the program: dimensions end there.

pub mod ast;
pub mod check;
pub mod claim;
pub mod cli;
pub mod data;
pub mod diagnostic;
pub mod eval;
pub mod handbook;
mod layout;
pub mod lower;
pub mod output;
pub mod parser;
pub mod print;
pub mod program;
mod repl;
pub mod report;
pub mod session;
pub mod source;
pub mod token;
