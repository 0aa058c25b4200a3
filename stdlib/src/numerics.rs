//! Numerical methods: `f64` in, `f64` out, no physics.

pub mod interpolate;
pub mod ode;
pub mod quadrature;
pub mod root;
