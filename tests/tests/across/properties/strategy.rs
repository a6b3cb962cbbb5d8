//! Random scenes whose bodies keep at least 2 units of air between them.

use coilwright_tests::{Body, Coil, Scene};
use proptest::prelude::*;

/// Heights of a slot, and the part of it that a body may fill.
const SLOT: f64 = 12.0;
const FILL: f64 = 10.0;

#[derive(Clone, Copy, Debug, PartialEq)]
enum Kind {
    Coil,
    Iron,
    Magnet,
}

/// Inner radius, thickness, lower face, height, and three numbers for whatever else a body needs, each in 0..1.
fn raw() -> impl Strategy<Value = (f64, f64, f64, f64, [f64; 3])> {
    (
        0.0..1.0,
        0.0..1.0,
        0.0..1.0,
        0.0..1.0,
        [0.0..1.0, 0.0..1.0, 0.0..1.0],
    )
}

fn scene(kinds: Vec<Kind>) -> impl Strategy<Value = Scene> {
    let count = kinds.len();
    proptest::collection::vec(raw(), count).prop_map(move |raws| {
        let mut scene = Scene {
            unit: "mm",
            coils: Vec::new(),
            bodies: Vec::new(),
            mirror: None,
        };
        for (slot, (kind, (inner, wide, low, high, more))) in kinds.iter().zip(raws).enumerate() {
            let height = round(1.0 + 6.0 * high);
            let z0 = round(1.0 + SLOT * slot as f64 + low * (FILL - height));
            let solid = *kind != Kind::Coil && inner < 0.5;
            let r0 = if solid { 0.0 } else { round(2.0 + 15.0 * inner) };
            let (r, z) = ([r0, round(r0 + 1.0 + 9.0 * wide)], [z0, round(z0 + height)]);
            let current_a = round(0.5 + 5.0 * more[0]) * if more[1] < 0.5 { -1.0 } else { 1.0 };
            match kind {
                Kind::Coil => scene.coils.push(Coil {
                    r,
                    z,
                    turns: (10.0 + 90.0 * more[2]).round(),
                    current_a,
                }),
                Kind::Iron => {
                    let permeability = round(10f64.powf(0.5 + 2.5 * more[0]));
                    scene.bodies.push(Body {
                        r,
                        z,
                        permeability,
                        remanence_t: 0.0,
                    });
                }
                Kind::Magnet => {
                    let remanence_t = round(0.3 + more[0]);
                    scene.bodies.push(Body {
                        r,
                        z,
                        permeability: 1.05,
                        remanence_t,
                    });
                }
            }
        }
        scene
    })
}

/// To hundredths, so that a failing scene is readable.
fn round(x: f64) -> f64 {
    (100.0 * x).round() / 100.0
}

/// Two or three coils and perhaps a piece of iron, in any order; no magnets.
pub fn coils_and_iron() -> impl Strategy<Value = Scene> {
    prop_oneof![
        Just(vec![Kind::Coil, Kind::Coil]),
        Just(vec![Kind::Coil, Kind::Iron, Kind::Coil]),
        Just(vec![Kind::Iron, Kind::Coil, Kind::Coil]),
        Just(vec![Kind::Coil, Kind::Coil, Kind::Coil]),
    ]
    .prop_flat_map(scene)
}

/// Anything: coils, iron, magnets.
pub fn anything() -> impl Strategy<Value = Scene> {
    prop_oneof![
        Just(vec![Kind::Coil, Kind::Magnet]),
        Just(vec![Kind::Iron, Kind::Coil]),
        Just(vec![Kind::Magnet, Kind::Iron, Kind::Coil]),
        Just(vec![Kind::Magnet, Kind::Magnet]),
        Just(vec![Kind::Coil, Kind::Iron, Kind::Coil]),
    ]
    .prop_flat_map(scene)
}
