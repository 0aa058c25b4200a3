//! What zij knows of physics: units, constants, cosmological models, and the
//! distances, times and horizons computed from them.
//!
//! Nothing here knows the syntax of the language. `lang` reads the
//! [`catalogue`], which describes every name, and calls the functions in it.

pub mod bibliography;
pub mod catalogue;
pub mod constants;
pub mod cosmology;
pub mod dimension;
pub mod mathematics;
pub mod model;
pub mod numerics;
pub mod prelude;
pub mod redshift;
pub mod slips;
pub mod units;
pub mod words;
