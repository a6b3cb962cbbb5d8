//! A scene: rectangular bodies, each in a slot of heights of its own so that none touches another.

use std::fmt::Write as _;

/// A coil of rectangular section; lengths in the scene's unit.
#[derive(Clone, Debug, PartialEq)]
pub struct Coil {
    /// Inner and outer radius.
    pub r: [f64; 2],
    /// Lower and upper face.
    pub z: [f64; 2],
    /// Turns, negative for the opposite sense.
    pub turns: f64,
    /// Current, A.
    pub current_a: f64,
}

/// A piece of iron or a magnet, likewise.
#[derive(Clone, Debug, PartialEq)]
pub struct Body {
    /// Inner and outer radius.
    pub r: [f64; 2],
    /// Lower and upper face.
    pub z: [f64; 2],
    /// Relative or recoil permeability.
    pub permeability: f64,
    /// Axial remanence, T; 0 for iron.
    pub remanence_t: f64,
}

/// A symmetry plane z = 0 and how the image's currents run.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Mirror {
    /// B crosses the plane squarely.
    Same,
    /// B lies in the plane.
    Opposite,
}

/// How every scene begins. Intervals must hold at any accuracy, so the properties are tried on small meshes. The
/// inductances alone decide how fine the mesh becomes: they do not depend on the currents.
fn head(unit: &str) -> String {
    format!("length_unit = \"{unit}\"\n\n[accuracy]\nof = [\"inductance\"]\nmax_triangles = 300000\n\n")
}

/// Coils `c0`, `c1`, ... and bodies `b0`, `b1`, ...; each body, and each coil, is a mover of its name.
#[derive(Clone, Debug, PartialEq)]
pub struct Scene {
    /// Length unit, as a case names it.
    pub unit: &'static str,
    /// Coils.
    pub coils: Vec<Coil>,
    /// Bodies.
    pub bodies: Vec<Body>,
    /// Whether only the half above z = 0 is described.
    pub mirror: Option<Mirror>,
}

impl Scene {
    /// The case file.
    pub fn case_text(&self) -> String {
        let mut text = head(self.unit);
        for (index, body) in self.bodies.iter().enumerate() {
            text += &body.stock(index);
            let more = if body.remanence_t == 0.0 {
                ""
            } else {
                "magnetized = [0, 1]\n"
            };
            text += &region(
                &format!("b{index}"),
                &format!("stuff{index}"),
                body.r,
                body.z,
                more,
            );
            text += &mover(&format!("b{index}"));
        }
        for (index, coil) in self.coils.iter().enumerate() {
            text += &region(&format!("c{index}"), "copper", coil.r, coil.z, "");
            text += &winding(
                index,
                &format!("\"c{index}\""),
                &format!("{}", coil.turns),
                coil.current_a,
            );
            text += &mover(&format!("c{index}"));
        }
        if let Some(mirror) = self.mirror {
            let currents = if mirror == Mirror::Same {
                "same"
            } else {
                "opposite"
            };
            let _ = write!(text, "[space]\nmirror = 0\nmirror_currents = \"{currents}\"\n");
        }
        text
    }

    /// The whole device that this half and its mirror describe, drawn in full: images carry the name of the
    /// original with `i` after it, and their turns are in series with it.
    pub fn unfolded_case_text(&self) -> String {
        let mut text = head(self.unit);
        let below = |z: [f64; 2]| [-z[1], -z[0]];
        for (index, body) in self.bodies.iter().enumerate() {
            text += &body.stock(index);
            let more = if body.remanence_t == 0.0 {
                ""
            } else {
                "magnetized = [0, 1]\n"
            };
            let image = match (body.remanence_t == 0.0, self.mirror) {
                (false, Some(Mirror::Opposite)) => "magnetized = [0, -1]\n",
                _ => more,
            };
            text += &region(
                &format!("b{index}"),
                &format!("stuff{index}"),
                body.r,
                body.z,
                more,
            );
            text += &region(
                &format!("b{index}i"),
                &format!("stuff{index}"),
                body.r,
                below(body.z),
                image,
            );
            text += &mover(&format!("b{index}"));
        }
        for (index, coil) in self.coils.iter().enumerate() {
            text += &region(&format!("c{index}"), "copper", coil.r, coil.z, "");
            text += &region(&format!("c{index}i"), "copper", coil.r, below(coil.z), "");
            let image = if self.mirror == Some(Mirror::Opposite) {
                -coil.turns
            } else {
                coil.turns
            };
            let sides = format!("\"c{index}\", \"c{index}i\"");
            text += &winding(
                index,
                &sides,
                &format!("[{}, {image}]", coil.turns),
                coil.current_a,
            );
            text += &mover(&format!("c{index}"));
        }
        text
    }

    /// Names of everything that a force acts on.
    pub fn movers(&self) -> Vec<String> {
        let bodies = (0..self.bodies.len()).map(|i| format!("b{i}"));
        bodies
            .chain((0..self.coils.len()).map(|i| format!("c{i}")))
            .collect()
    }
}

impl Body {
    fn stock(&self, index: usize) -> String {
        let law = if self.remanence_t == 0.0 {
            format!("relative_permeability = {}", self.permeability)
        } else {
            format!(
                "remanence = \"{} T\"\nrecoil_permeability = {}",
                self.remanence_t, self.permeability
            )
        };
        format!("[stock.stuff{index}]\n{law}\n")
    }
}

fn region(name: &str, material: &str, r: [f64; 2], z: [f64; 2], more: &str) -> String {
    let [r1, r2] = r;
    let [z1, z2] = z;
    format!(
        "[[region]]\nname = \"{name}\"\nmaterial = \"{material}\"\nrect = {{ r = [{r1}, {r2}], z = [{z1}, {z2}] }}\n{more}"
    )
}

fn winding(index: usize, regions: &str, turns: &str, current_a: f64) -> String {
    format!(
        "[[winding]]\nname = \"c{index}\"\nregions = [{regions}]\nturns = {turns}\ncurrent = \"{current_a} A\"\n"
    )
}

fn mover(region: &str) -> String {
    format!("[[mover]]\nname = \"{region}\"\nregions = [\"{region}\"]\n")
}
