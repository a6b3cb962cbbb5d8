//! `[[winding]]`: turns, drive, wire.

use std::f64::consts::PI;
use std::ops::Range;

use solver::problem::{Conductor, Drive, Turns, Winding};

use super::expression::Dimension;
use super::materials::Materials;
use super::model::located::Located;
use super::model::quantity::{Amount, OneOrMany};
use super::model::winding::{WindingKeys, Wire};
use super::regions::{ReadRegion, conductivity_at, resistivity_ratio};
use super::roster::Roster;
use super::values::{Values, celsius_text};
use crate::caution::Caution;

/// Temperature coefficient of copper at 20 °C, 1/K (IEC 60028, from memory), and that temperature, °C: for a
/// measured resistance whose conductor is not known.
const COPPER_COEFFICIENT: (f64, f64) = (0.003_93, 20.0);
/// Most strands of a wire.
const MOST_STRANDS: usize = 1_000_000;
/// Largest and smallest gauge numbers that wire is made in.
const GAUGES: [f64; 2] = [-3.0, 56.0];

/// What windings are read against.
pub struct Surroundings<'a> {
    /// Region names.
    pub roster: &'a Roster,
    /// Regions, `None` where one is wrong.
    pub regions: &'a [Option<ReadRegion>],
    /// Materials.
    pub materials: &'a Materials,
    /// The case's temperature, °C.
    pub temperature_c: f64,
}

/// Reads a winding; `None` if something is wrong, and that is noted.
pub fn read(keys: &Located<WindingKeys>, around: &Surroundings<'_>, values: &mut Values) -> Option<Winding> {
    let winding = &keys.value;
    let mut reader = Reader { keys, around, values };
    reader.later_keys();
    let regions = around.roster.find_all(&winding.regions, reader.values);
    let turns = reader.turns();
    let drive = reader.drive();
    let temperature = reader.temperature(&regions);
    let conductor = temperature.and_then(|temperature| reader.conductor(temperature, &regions));
    let lead_resistance = reader.lead();
    reader.check_voltage();
    if regions.len() != winding.regions.value.len() {
        return None;
    }
    Some(Winding {
        name: winding.name.value.clone(),
        regions,
        turns: turns?,
        drive: drive?,
        conductor: conductor?,
        lead_resistance_ohm: lead_resistance?,
    })
}

struct Reader<'a> {
    keys: &'a Located<WindingKeys>,
    around: &'a Surroundings<'a>,
    values: &'a mut Values,
}

impl<'a> Reader<'a> {
    fn name(&self) -> &'a str {
        &self.keys.value.name.value
    }

    /// Keys that this version understands but does not solve.
    fn later_keys(&mut self) {
        let keys = &self.keys.value;
        if self.values.set_true(&keys.one_piece, "one_piece")
            && let Some(flag) = &keys.one_piece
        {
            self.values.not_solved_yet(
                &flag.span,
                "`one_piece`, solid turns whose current spreads by itself",
            );
        }
        if let Some(phase) = &keys.phase {
            self.values.amount(phase, "phase", Dimension::NUMBER);
            self.values
                .not_solved_yet(&phase.span, "`phase`, of the alternating regime");
        }
        if let Some(capacitance) = &keys.parallel_capacitance {
            self.values
                .positive(capacitance, "parallel_capacitance", Dimension::CAPACITANCE);
        }
    }

    fn turns(&mut self) -> Option<Turns> {
        let keys = &self.keys.value;
        let Some(turns) = &keys.turns else {
            if keys.one_piece.is_none() {
                self.values.fault(
                    &keys.name.span,
                    format!("winding `{}` needs the key `turns`", self.name()),
                );
            }
            return None;
        };
        match &turns.value {
            OneOrMany::One(quantity) => {
                let amount = Amount {
                    value: quantity.clone(),
                    span: turns.span.clone(),
                };
                self.nonzero(&amount).map(Turns::Total)
            }
            OneOrMany::Many(list) => {
                let numbers: Vec<Option<f64>> = list.iter().map(|amount| self.nonzero(amount)).collect();
                let regions = keys.regions.value.len();
                if list.len() != regions {
                    let message = format!("`turns` has {} numbers for {regions} regions", list.len());
                    self.values.fault_with_help(
                        &turns.span,
                        message,
                        "give the total, or one number per region",
                    );
                    return None;
                }
                numbers
                    .into_iter()
                    .collect::<Option<Vec<f64>>>()
                    .map(Turns::PerRegion)
            }
        }
    }

    fn nonzero(&mut self, amount: &Amount) -> Option<f64> {
        let turns = self.values.amount(amount, "turns", Dimension::NUMBER)?;
        if turns == 0.0 {
            let message = format!("winding `{}` has zero turns", self.name());
            self.values.fault_with_help(
                &amount.span,
                message,
                "negative turns are wound in the opposite sense",
            );
            return None;
        }
        Some(turns)
    }

    /// The one drive.
    fn drive(&mut self) -> Option<Drive> {
        let keys = &self.keys.value;
        let open = self.values.set_true(&keys.open, "open");
        let shorted = self.values.set_true(&keys.shorted, "shorted");
        let current = keys
            .current
            .as_ref()
            .map(|amount| self.values.amount(amount, "current", Dimension::CURRENT));
        let voltage = keys
            .voltage
            .as_ref()
            .map(|amount| self.values.amount(amount, "voltage", Dimension::VOLTAGE));
        let load = keys
            .load
            .as_ref()
            .map(|amount| self.values.positive(amount, "load", Dimension::RESISTANCE));
        let given: Vec<(&str, Range<usize>)> = [
            ("current", keys.current.as_ref().map(|amount| &amount.span)),
            ("voltage", keys.voltage.as_ref().map(|amount| &amount.span)),
            ("open", keys.open.as_ref().map(|flag| &flag.span)),
            ("shorted", keys.shorted.as_ref().map(|flag| &flag.span)),
            ("load", keys.load.as_ref().map(|amount| &amount.span)),
        ]
        .into_iter()
        .filter_map(|(key, span)| Some((key, span?.clone())))
        .collect();
        match given.as_slice() {
            [] => {
                let message = format!("winding `{}` has no drive", self.name());
                let help = "give one of current, voltage, open = true, shorted = true, load";
                self.values.fault_with_help(&keys.name.span, message, help);
                None
            }
            [_] => match (current, voltage) {
                (Some(current), _) => current.map(Drive::Current),
                (_, Some(voltage)) => voltage.map(Drive::Voltage),
                _ if open || shorted => Some(Drive::Passive),
                _ => load.flatten().map(|_| Drive::Passive),
            },
            [_, (_, second), ..] => {
                let words: Vec<String> = given.iter().map(|(key, _)| format!("`{key}`")).collect();
                let message = format!(
                    "winding `{}` has more than one drive: {}",
                    self.name(),
                    words.join(", ")
                );
                let second = self.values.with_key(second);
                self.values.fault_with_help(&second, message, "give exactly one");
                None
            }
        }
    }

    /// Its own temperature, or that of its regions where they agree, or the case's, °C.
    fn temperature(&mut self, regions: &[usize]) -> Option<f64> {
        if let Some(temperature) = &self.keys.value.temperature {
            return self.values.temperature_c(temperature, "temperature");
        }
        let of_region = |&index: &usize| self.around.regions.get(index)?.as_ref()?.own_temperature_c;
        let first = regions.first().and_then(of_region);
        let same = regions.iter().all(|index| of_region(index) == first);
        Some(first.filter(|_| same).unwrap_or(self.around.temperature_c))
    }

    /// What its resistance is made of; outer `None` after a fault.
    #[expect(
        clippy::option_option,
        reason = "a fault and an absent resistance are different things"
    )]
    fn conductor(&mut self, temperature_c: f64, regions: &[usize]) -> Option<Option<Conductor>> {
        let keys = &self.keys.value;
        let given: Vec<(&str, &Range<usize>)> = [
            ("wire", keys.wire.as_ref().map(|wire| &wire.span)),
            ("resistance", keys.resistance.as_ref().map(|amount| &amount.span)),
            ("one_piece", keys.one_piece.as_ref().map(|flag| &flag.span)),
        ]
        .into_iter()
        .filter_map(|(key, span)| Some((key, span?)))
        .collect();
        if let [(first, _), (second, span), ..] = given.as_slice() {
            let message = format!("winding `{}` has both `{first}` and `{second}`", self.name());
            let span = self.values.with_key(span);
            self.values
                .fault_with_help(&span, message, "its resistance comes from one of them");
            return None;
        }
        match (&keys.wire, &keys.resistance) {
            (Some(wire), _) => self.wire(wire, temperature_c).map(Some),
            (None, Some(resistance)) => self.measured(resistance, temperature_c, regions).map(Some),
            (None, None) => Some(None),
        }
    }

    fn wire(&mut self, wire: &Located<Wire>, temperature_c: f64) -> Option<Conductor> {
        let strands = match &wire.value.strands {
            Some(strands) => self.values.whole(strands, "strands", 1, MOST_STRANDS),
            None => Some(1),
        };
        let diameter = self.diameter(wire);
        let outside = match &wire.value.outside {
            Some(outside) => self
                .values
                .positive(outside, "outside", Dimension::LENGTH)
                .map(Some),
            None => Some(None),
        };
        let copper = Located {
            value: "copper".to_owned(),
            span: wire.span.clone(),
        };
        let name = wire.value.material.as_ref().unwrap_or(&copper);
        let material = self.around.materials.find(name, self.values)?;
        if material.conductivity_s_per_m <= 0.0 {
            let message = format!("the wire's material `{}` does not conduct", name.value);
            self.values.fault(&name.span, message);
            return None;
        }
        let conductivity = conductivity_at(material, temperature_c, name, self.values)?;
        // Strands are far fewer than 2^53.
        let copper_area = strands? as f64 * circle_area(diameter?);
        let outside_area = outside?.map_or(copper_area, circle_area);
        // Round-off only: an outside diameter equal to the bare one is allowed.
        if outside_area < copper_area * (1.0 - 1e-9) {
            let span = wire
                .value
                .outside
                .as_ref()
                .map_or(&wire.span, |outside| &outside.span);
            let message = "`outside` is smaller than the bare conductor";
            self.values.fault_with_help(
                span,
                message,
                "it is the outside diameter of one turn with its insulation",
            );
            return None;
        }
        Some(Conductor::Wire {
            copper_area_m2: copper_area,
            outside_area_m2: outside_area,
            resistivity_ohm_m: 1.0 / conductivity,
            density_kg_per_m3: material.density_kg_per_m3,
        })
    }

    /// Diameter of the bare conductor, m, given or by its gauge (ASTM B258: 0.127 mm x 92^((36 - n)/39)).
    fn diameter(&mut self, wire: &Located<Wire>) -> Option<f64> {
        match (&wire.value.diameter, &wire.value.awg) {
            (Some(diameter), None) => self.values.positive(diameter, "diameter", Dimension::LENGTH),
            (None, Some(awg)) => {
                let gauge = self.values.amount(awg, "awg", Dimension::NUMBER)?;
                if !(GAUGES[0]..=GAUGES[1]).contains(&gauge) {
                    let message = format!(
                        "`awg` must be from {} (0000) to {}, not {gauge}",
                        GAUGES[0], GAUGES[1]
                    );
                    self.values.fault(&awg.span, message);
                    return None;
                }
                Some(0.127e-3 * 92f64.powf((36.0 - gauge) / 39.0))
            }
            (Some(_), Some(awg)) => {
                self.values.fault(
                    &awg.span,
                    "the wire has both `diameter` and `awg`; give one of them",
                );
                None
            }
            (None, None) => {
                self.values
                    .fault(&wire.span, "the wire needs its `diameter`, or `awg`");
                None
            }
        }
    }

    /// A measured resistance, brought to the temperature.
    fn measured(&mut self, resistance: &Amount, temperature_c: f64, regions: &[usize]) -> Option<Conductor> {
        let measured = self
            .values
            .positive(resistance, "resistance", Dimension::RESISTANCE)?;
        let (coefficient, reference_c, what) = self.measured_coefficient(regions);
        let name = &self.keys.value.name;
        let ratio = resistivity_ratio(coefficient, reference_c, temperature_c, name, self.values)?;
        if ratio != 1.0 {
            self.values.cautions.push(Caution {
                about: self.name().to_owned(),
                text: format!(
                    "its measured resistance is taken to hold at {} and is brought to \
                     {} with the temperature coefficient of {what} ({coefficient}/K)",
                    celsius_text(reference_c),
                    celsius_text(temperature_c),
                ),
                source: "common practice, no source".to_owned(),
            });
        }
        Some(Conductor::Measured(measured * ratio))
    }

    /// Temperature coefficient for a measured resistance: that of its regions' material if they have one, else
    /// copper's. Also the reference temperature and the material's name.
    fn measured_coefficient(&self, regions: &[usize]) -> (f64, f64, String) {
        let first = regions
            .first()
            .and_then(|&index| self.around.regions.get(index)?.as_ref());
        match first {
            Some(region) if region.resistivity_coefficient.0 != 0.0 => (
                region.resistivity_coefficient.0,
                region.resistivity_coefficient.1,
                region.material.clone(),
            ),
            _ => (COPPER_COEFFICIENT.0, COPPER_COEFFICIENT.1, "copper".to_owned()),
        }
    }

    fn lead(&mut self) -> Option<f64> {
        let Some(lead) = &self.keys.value.lead else {
            return Some(0.0);
        };
        if let Some(inductance) = &lead.value.inductance {
            self.values
                .not_negative(inductance, "inductance", Dimension::INDUCTANCE);
        }
        if let Some(capacitance) = &lead.value.capacitance {
            self.values
                .positive(capacitance, "capacitance", Dimension::CAPACITANCE);
            if self.keys.value.voltage.is_some() || self.keys.value.current.is_some() {
                let message = "no direct current flows through the capacitance in the lead";
                self.values.fault_with_help(
                    &capacitance.span,
                    message,
                    "in the static regime leave it out, or write open = true",
                );
            }
        }
        match &lead.value.resistance {
            Some(resistance) => self
                .values
                .not_negative(resistance, "resistance", Dimension::RESISTANCE),
            None => Some(0.0),
        }
    }

    /// A voltage needs a resistance to drive a direct current through.
    fn check_voltage(&mut self) {
        let keys = &self.keys.value;
        let Some(voltage) = &keys.voltage else { return };
        if keys.wire.is_none() && keys.resistance.is_none() && keys.one_piece.is_none() {
            let message = format!("winding `{}` has a voltage but no resistance", self.name());
            let place = self.values.with_key(&voltage.span);
            self.values.fault_with_help(
                &place,
                message,
                "give its wire or its measured resistance, or drive it by a current",
            );
        }
    }
}

fn circle_area(diameter: f64) -> f64 {
    0.25 * PI * diameter * diameter
}
