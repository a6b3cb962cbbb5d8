//! Case files as text, as a user would write them: the checks go through the same door as everybody.

use std::fmt::Write as _;

use crate::exact::filament::Ring;

/// A case file under construction; lengths are metres.
#[derive(Clone, Debug)]
pub struct CaseText {
    text: String,
}

impl CaseText {
    /// An empty case.
    pub fn new(title: &str) -> Self {
        Self {
            text: format!("title = \"{title}\"\nlength_unit = \"m\"\n"),
        }
    }

    /// Adds any lines.
    pub fn lines(mut self, lines: &str) -> Self {
        self.text.push('\n');
        self.text.push_str(lines);
        self.text.push('\n');
        self
    }

    /// A material of constant permeability.
    pub fn iron(self, name: &str, relative_permeability: f64) -> Self {
        self.lines(&format!(
            "[stock.{name}]\nrelative_permeability = {relative_permeability}"
        ))
    }

    /// A material of B = mu0 H + Js H / (H + Hs).
    pub fn saturating(self, name: &str, polarization_t: f64, half_field_a_per_m: f64) -> Self {
        self.lines(&format!(
            "[stock.{name}]\nsaturation = {{ polarization = {polarization_t}, half_field = {half_field_a_per_m} }}"
        ))
    }

    /// A magnet with a recoil permeability of 1.
    pub fn magnet_stock(self, name: &str, remanence_t: f64) -> Self {
        self.lines(&format!(
            "[stock.{name}]\nremanence = \"{remanence_t} T\"\nrecoil_permeability = 1"
        ))
    }

    /// A rectangular region; `more` are further keys.
    pub fn rect(self, name: &str, material: &str, ring: Ring, more: &str) -> Self {
        let Ring {
            r: [r1, r2],
            z: [z1, z2],
        } = ring;
        self.lines(&format!(
            "[[region]]\nname = \"{name}\"\nmaterial = \"{material}\"\nrect = {{ r = [{r1}, {r2}], z = [{z1}, {z2}] }}\n{more}"
        ))
    }

    /// A circular region around the origin.
    pub fn ball(self, name: &str, material: &str, radius: f64, more: &str) -> Self {
        self.lines(&format!(
            "[[region]]\nname = \"{name}\"\nmaterial = \"{material}\"\ncircle = {{ centre = [0, 0], radius = {radius} }}\n{more}"
        ))
    }

    /// A coil: a copper region and a winding of the same name.
    pub fn coil(self, name: &str, ring: Ring, turns: f64, current_a: f64) -> Self {
        self.rect(name, "copper", ring, "").lines(&format!(
            "[[winding]]\nname = \"{name}\"\nregions = [\"{name}\"]\nturns = {turns}\ncurrent = \"{current_a} A\""
        ))
    }

    /// A mover of one region, with the region's name.
    pub fn mover(self, region: &str) -> Self {
        self.lines(&format!(
            "[[mover]]\nname = \"{region}\"\nregions = [\"{region}\"]"
        ))
    }

    /// A traverse of one point.
    pub fn point(self, name: &str, r: f64, z: f64) -> Self {
        self.lines(&format!("[[traverse]]\nname = \"{name}\"\nat = [{r}, {z}]"))
    }

    /// A search coil of one turn.
    pub fn search_coil(self, name: &str, r: f64, z: f64) -> Self {
        self.lines(&format!(
            "[[search_coil]]\nname = \"{name}\"\nat = [{r}, {z}]\nturns = 1"
        ))
    }

    /// The uniform axial field the case sits in.
    pub fn ambient(self, axial_b_t: f64) -> Self {
        let mut text = self;
        let _ = write!(text.text, "\n[ambient]\naxial_b = \"{axial_b_t} T\"\n");
        text
    }

    /// The finished text.
    pub fn as_str(&self) -> &str {
        &self.text
    }
}
