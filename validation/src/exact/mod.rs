//! Closed forms and quadratures of published formulas, written for the checks alone: none of it shares a line
//! with the program's own field computation.

pub mod bessel;
pub mod coil;
pub mod elliptic;
pub mod filament;
pub mod quadrature;

/// Magnetic constant used in all reference values, H/m.
pub const MU0: f64 = 4e-7 * std::f64::consts::PI;
