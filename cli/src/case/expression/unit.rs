//! The one table of units.

use super::dimension::Dimension;

/// A unit: `value SI = number * factor + offset`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Unit {
    /// SI value of one unit.
    pub factor: f64,
    /// SI value of zero units; not zero only for absolute temperatures in degC.
    pub offset: f64,
    /// Its dimension.
    pub dimension: Dimension,
}

/// SI prefixes, from atto to exa.
const PREFIXES: &[(&str, f64)] = &[
    ("da", 1e1),
    ("a", 1e-18),
    ("f", 1e-15),
    ("p", 1e-12),
    ("n", 1e-9),
    ("u", 1e-6),
    ("µ", 1e-6),
    ("μ", 1e-6),
    ("m", 1e-3),
    ("c", 1e-2),
    ("d", 1e-1),
    ("h", 1e2),
    ("k", 1e3),
    ("M", 1e6),
    ("G", 1e9),
    ("T", 1e12),
    ("P", 1e15),
    ("E", 1e18),
];

/// Units that take SI prefixes: name, SI value, dimension.
const SI_UNITS: &[(&str, f64, Dimension)] = &[
    ("m", 1.0, Dimension::LENGTH),
    ("g", 1e-3, Dimension::of(0, 1, 0, 0, 0)),
    ("s", 1.0, Dimension::TIME),
    ("A", 1.0, Dimension::CURRENT),
    ("K", 1.0, Dimension::TEMPERATURE),
    ("V", 1.0, Dimension::VOLTAGE),
    ("VA", 1.0, Dimension::of(2, 1, -3, 0, 0)),
    ("W", 1.0, Dimension::of(2, 1, -3, 0, 0)),
    ("J", 1.0, Dimension::of(2, 1, -2, 0, 0)),
    ("N", 1.0, Dimension::of(1, 1, -2, 0, 0)),
    ("H", 1.0, Dimension::INDUCTANCE),
    ("F", 1.0, Dimension::CAPACITANCE),
    ("T", 1.0, Dimension::FLUX_DENSITY),
    ("Wb", 1.0, Dimension::of(2, 1, -2, -1, 0)),
    ("ohm", 1.0, Dimension::RESISTANCE),
    ("Ω", 1.0, Dimension::RESISTANCE),
    ("S", 1.0, Dimension::of(-2, -1, 3, 2, 0)),
    ("Hz", 1.0, Dimension::FREQUENCY),
    ("rad", 1.0, Dimension::NUMBER),
];

/// Units without prefixes: name, SI value, dimension. The inch and the pound-force are exact by definition
/// (international yard and pound agreement, 1959; standard gravity 9.80665 m/s²).
const OTHER_UNITS: &[(&str, f64, Dimension)] = &[
    ("in", 0.0254, Dimension::LENGTH),
    ("mil", 0.0254e-3, Dimension::LENGTH),
    ("min", 60.0, Dimension::TIME),
    ("h", 3600.0, Dimension::TIME),
    ("deg", std::f64::consts::PI / 180.0, Dimension::NUMBER),
    ("°", std::f64::consts::PI / 180.0, Dimension::NUMBER),
    ("rpm", 1.0 / 60.0, Dimension::FREQUENCY),
    ("%", 0.01, Dimension::NUMBER),
    ("G", 1e-4, Dimension::FLUX_DENSITY),
    ("Oe", 250.0 / std::f64::consts::PI, Dimension::FIELD_STRENGTH),
    ("lbf", 0.45359237 * 9.80665, Dimension::of(1, 1, -2, 0, 0)),
    ("kgf", 9.80665, Dimension::of(1, 1, -2, 0, 0)),
];

/// Zero degrees Celsius, K.
pub const ZERO_CELSIUS_K: f64 = 273.15;

/// The unit of this name, with its SI prefix if it has one.
pub fn find(name: &str) -> Option<Unit> {
    if matches!(name, "degC" | "°C") {
        return Some(Unit {
            factor: 1.0,
            offset: ZERO_CELSIUS_K,
            dimension: Dimension::TEMPERATURE,
        });
    }
    let plain = SI_UNITS
        .iter()
        .chain(OTHER_UNITS)
        .find(|(unit, ..)| *unit == name);
    if let Some(&(_, factor, dimension)) = plain {
        return Some(Unit {
            factor,
            offset: 0.0,
            dimension,
        });
    }
    PREFIXES.iter().find_map(|(prefix, scale)| {
        let rest = name.strip_prefix(prefix)?;
        let &(_, factor, dimension) = SI_UNITS.iter().find(|(unit, ..)| *unit == rest)?;
        Some(Unit {
            factor: prefixed(*scale, factor),
            offset: 0.0,
            dimension,
        })
    })
}

/// Scale times factor; dividing by the inverse power of ten rounds once where multiplying would round twice.
fn prefixed(scale: f64, factor: f64) -> f64 {
    if scale * factor < 1.0 {
        1.0 / (1.0 / scale * (1.0 / factor)).round()
    } else {
        (scale * factor).round()
    }
}

/// Names of all units without prefixes, and the prefixed ones that designers write often: for "did you mean".
pub fn familiar_names() -> impl Iterator<Item = &'static str> {
    let written = [
        "mm", "cm", "um", "km", "ms", "us", "mA", "kA", "mV", "kV", "mW", "kW", "mJ", "kJ", "kN",
    ];
    let more = [
        "mH", "uH", "nH", "uF", "nF", "pF", "mT", "uT", "mWb", "mohm", "kohm", "MS", "kHz", "MHz", "kg",
    ];
    let plain = SI_UNITS
        .iter()
        .chain(OTHER_UNITS)
        .map(|(unit, ..)| *unit)
        .filter(|unit| unit.is_ascii());
    written.into_iter().chain(more).chain(plain).chain(["degC"])
}
