//! Physical dimensions as exponents of (m, kg, s, A, K).

/// Parts of one that an exponent is counted in, so that square and cube roots stay exact.
const PARTS: i32 = 6;

/// Exponents of (m, kg, s, A, K), each in sixths.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct Dimension([i32; 5]);

/// What common dimensions are called, the SI unit they are written in, and an example of such a value.
const NAMED: &[(Dimension, &str, &str, &str)] = &[
    (Dimension::NUMBER, "a pure number", "", "900"),
    (Dimension::LENGTH, "a length", "m", "2.5 mm"),
    (Dimension::of(2, 0, 0, 0, 0), "an area", "m^2", "4 mm^2"),
    (Dimension::of(3, 0, 0, 0, 0), "a volume", "m^3", "2 m^3"),
    (
        Dimension::of(-1, 0, 0, 0, 0),
        "a number per length",
        "1/m",
        "30/m",
    ),
    (Dimension::of(0, 1, 0, 0, 0), "a mass", "kg", "20 g"),
    (Dimension::TIME, "a time", "s", "10 min"),
    (Dimension::FREQUENCY, "a frequency", "Hz", "85 kHz"),
    (Dimension::of(1, 0, -1, 0, 0), "a speed", "m/s", "3 m/s"),
    (Dimension::CURRENT, "a current", "A", "0.5 A"),
    (
        Dimension::of(-2, 0, 0, 1, 0),
        "a current density",
        "A/m^2",
        "4 A/mm^2",
    ),
    (Dimension::FIELD_STRENGTH, "a field strength", "A/m", "400 A/m"),
    (Dimension::TEMPERATURE, "a temperature", "K", "20 degC"),
    (
        Dimension::PER_KELVIN,
        "a coefficient per kelvin",
        "1/K",
        "0.4 %/K",
    ),
    (Dimension::of(1, 1, -2, 0, 0), "a force", "N", "12 N"),
    (Dimension::of(2, 1, -2, 0, 0), "an energy", "J", "3 mJ"),
    (Dimension::of(2, 1, -3, 0, 0), "a power", "W", "5 W"),
    (
        Dimension::of(-1, 1, -3, 0, 0),
        "a loss density",
        "W/m^3",
        "300 W/m^3",
    ),
    (Dimension::DENSITY, "a density", "kg/m^3", "7.8 g/cm^3"),
    (Dimension::VOLTAGE, "a voltage", "V", "24 V"),
    (Dimension::RESISTANCE, "a resistance", "ohm", "31 ohm"),
    (
        Dimension::of(3, 1, -3, -2, 0),
        "a resistivity",
        "ohm*m",
        "0.017 ohm*mm^2/m",
    ),
    (Dimension::of(-2, -1, 3, 2, 0), "a conductance", "S", "2 S"),
    (Dimension::CONDUCTIVITY, "a conductivity", "S/m", "58 MS/m"),
    (Dimension::INDUCTANCE, "an inductance", "H", "40 uH"),
    (Dimension::CAPACITANCE, "a capacitance", "F", "100 nF"),
    (Dimension::FLUX_DENSITY, "a flux density", "T", "1.2 T"),
    (Dimension::of(2, 1, -2, -1, 0), "a flux", "Wb", "2 mWb"),
    (Dimension::of(0, 0, 1, 1, 0), "a charge", "A*s", "2 A*s"),
    (Dimension::of(1, 1, -2, -2, 0), "a permeability", "H/m", "2 uH/m"),
];

impl Dimension {
    /// A pure number.
    pub const NUMBER: Self = Self::of(0, 0, 0, 0, 0);
    /// Length.
    pub const LENGTH: Self = Self::of(1, 0, 0, 0, 0);
    /// Time.
    pub const TIME: Self = Self::of(0, 0, 1, 0, 0);
    /// Frequency.
    pub const FREQUENCY: Self = Self::of(0, 0, -1, 0, 0);
    /// Electric current.
    pub const CURRENT: Self = Self::of(0, 0, 0, 1, 0);
    /// Magnetic field strength.
    pub const FIELD_STRENGTH: Self = Self::of(-1, 0, 0, 1, 0);
    /// Temperature.
    pub const TEMPERATURE: Self = Self::of(0, 0, 0, 0, 1);
    /// One over a temperature.
    pub const PER_KELVIN: Self = Self::of(0, 0, 0, 0, -1);
    /// Mass density.
    pub const DENSITY: Self = Self::of(-3, 1, 0, 0, 0);
    /// Voltage.
    pub const VOLTAGE: Self = Self::of(2, 1, -3, -1, 0);
    /// Resistance.
    pub const RESISTANCE: Self = Self::of(2, 1, -3, -2, 0);
    /// Conductivity.
    pub const CONDUCTIVITY: Self = Self::of(-3, -1, 3, 2, 0);
    /// Inductance.
    pub const INDUCTANCE: Self = Self::of(2, 1, -2, -2, 0);
    /// Capacitance.
    pub const CAPACITANCE: Self = Self::of(-2, -1, 4, 2, 0);
    /// Magnetic flux density.
    pub const FLUX_DENSITY: Self = Self::of(0, 1, -2, -1, 0);

    /// The dimension with these whole exponents of m, kg, s, A, K.
    pub const fn of(m: i32, kg: i32, s: i32, a: i32, k: i32) -> Self {
        Self([m * PARTS, kg * PARTS, s * PARTS, a * PARTS, k * PARTS])
    }

    /// Dimension of a product.
    pub fn times(self, other: Self) -> Self {
        Self(std::array::from_fn(|i| self.0[i].saturating_add(other.0[i])))
    }

    /// Dimension of a quotient.
    pub fn per(self, other: Self) -> Self {
        Self(std::array::from_fn(|i| self.0[i].saturating_sub(other.0[i])))
    }

    /// Dimension of a power; `None` when an exponent would not be a multiple of 1/6 or is absurdly large.
    pub fn power(self, exponent: f64) -> Option<Self> {
        let mut out = [0; 5];
        for (slot, part) in out.iter_mut().zip(self.0) {
            let exact = f64::from(part) * exponent;
            if !((exact - exact.round()).abs() < 1e-9 && exact.abs() < 1e4) {
                return None;
            }
            // Rounded and below 1e4: fits.
            *slot = exact.round() as i32;
        }
        Some(Self(out))
    }

    /// The SI unit, as an expression can be written with it: `m`, `A/m`, `kg*m/s^4`; empty for a pure number.
    pub fn si_unit(self) -> String {
        if let Some((_, _, unit, _)) = NAMED.iter().find(|(dimension, ..)| *dimension == self) {
            return (*unit).to_owned();
        }
        let symbols = ["m", "kg", "s", "A", "K"];
        let factors = |sign: i32| {
            symbols
                .iter()
                .zip(self.0)
                .filter(move |(_, part)| part.signum() == sign)
                .map(|(symbol, part)| match (part.abs() / PARTS, part.abs() % PARTS) {
                    (1, 0) => (*symbol).to_owned(),
                    (whole, 0) => format!("{symbol}^{whole}"),
                    _ => format!("{symbol}^({}/{PARTS})", part.abs()),
                })
        };
        let above: Vec<String> = factors(1).collect();
        let above = if above.is_empty() {
            "1".to_owned()
        } else {
            above.join("*")
        };
        factors(-1).fold(above, |text, factor| format!("{text}/{factor}"))
    }

    /// What it is, for a person: `a length`, or `a value in kg*m/s^4`.
    pub fn describe(self) -> String {
        NAMED
            .iter()
            .find(|(dimension, ..)| *dimension == self)
            .map_or_else(
                || format!("a value in {}", self.si_unit()),
                |(_, words, ..)| (*words).to_owned(),
            )
    }

    /// An example of such a value.
    pub fn example(self) -> String {
        NAMED
            .iter()
            .find(|(dimension, ..)| *dimension == self)
            .map_or_else(
                || format!("2*{}", self.si_unit()),
                |(.., example)| (*example).to_owned(),
            )
    }
}

/// An SI value written so that reading it gives the same bits: `0.0015 m`, `3.0*kg*m/s^4`, `900.0`.
pub fn write_si(si: f64, dimension: Dimension) -> String {
    let unit = dimension.si_unit();
    match unit.strip_prefix('1') {
        // `1/K`: a number over a unit.
        Some(rest) => format!("{si:?}{rest}"),
        None if unit.is_empty() => format!("{si:?}"),
        // A lone unit, or the first of several, belongs to the number only if nothing else follows it.
        None if unit.chars().all(char::is_alphanumeric) => format!("{si:?} {unit}"),
        None => format!("{si:?}*{unit}"),
    }
}

/// An SI value as a TOML value that reads as the same bits: a bare number, or an expression in quotes.
pub fn toml_value(si: f64, dimension: Dimension) -> String {
    if dimension == Dimension::NUMBER {
        write_si(si, dimension)
    } else {
        format!("\"{}\"", write_si(si, dimension))
    }
}
