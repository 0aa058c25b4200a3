//! Long sheets for measuring speed.
