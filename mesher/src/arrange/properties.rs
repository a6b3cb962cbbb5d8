//! Random drawings against the painting itself.

use proptest::prelude::*;

use super::*;
use crate::curve::Point;
use crate::strategies::{noisy_sections, outlines, sections, shallow_sections};

/// Random points from a seed (SplitMix64: Steele, Lea & Flood, OOPSLA 2014).
struct Dice(u64);

impl Dice {
    fn next(&mut self) -> f64 {
        self.0 = self.0.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut x = self.0;
        x = (x ^ (x >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        x = (x ^ (x >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        ((x ^ (x >> 31)) >> 11) as f64 / (1_u64 << 53) as f64
    }
}

fn outlines_of(section: &Section) -> impl Iterator<Item = &Outline> {
    section.regions.iter().flat_map(|region| &region.copies)
}

/// Distance from everything drawn below which welding may have changed what lies at a point: a vertex may be
/// moved in some rounds, each time by no more than the tolerance.
fn blurred(section: &Section) -> f64 {
    4.0 * WELD_SHARE * drawing_bounds(section).size()
}

fn check_points(section: &Section, arrangement: &Arrangement, seed: u64) -> Result<(), TestCaseError> {
    const COUNT: usize = 800;
    let bounds = drawing_bounds(section);
    let (low, extent) = (bounds.low, bounds.high - bounds.low);
    let box_m2 = extent.r * extent.z;
    let mut dice = Dice(seed);
    let mut hits = vec![0_u32; arrangement.parts.len()];
    let blur = blurred(section);
    for _ in 0..COUNT {
        let point = Point::new(low.r + dice.next() * extent.r, low.z + dice.next() * extent.z);
        let part = section.painted_at(point);
        hits[part as usize] += 1;
        let found = arrangement.part_at(point);
        let near_curve = outlines_of(section)
            .flat_map(Outline::curves)
            .any(|curve| curve.distance_m(point) <= blur);
        let beyond = arrangement.circle.is_some_and(|circle| {
            Point::new(0.0, circle.centre_z_m).distance(point) > circle.radius_m * (1.0 - 1e-12)
        });
        let part = if beyond { OUTSIDE } else { part };
        prop_assert!(
            found == part || near_curve,
            "at {point}: part {found}, painted {part}"
        );
    }
    // Hits are binomial; five standard deviations and ten hits leave a chance below 1e-6 each.
    for (part, &count) in arrangement.parts.iter().zip(&hits).skip(1) {
        let expected = part.area_m2 / box_m2 * COUNT as f64;
        let deviation = (f64::from(count) - expected).abs();
        prop_assert!(
            deviation <= 5.0 * expected.max(0.0).sqrt() + 10.0,
            "{count} hits of {expected}: {part:?}"
        );
    }
    Ok(())
}

/// Points just beside every edge, at a tenth of a thousandth of the drawing's size: thin faces and cusps too.
fn check_beside_edges(section: &Section, arrangement: &Arrangement) -> Result<(), TestCaseError> {
    let offset = 1e-4 * drawing_bounds(section).size();
    let blur = blurred(section);
    for edge in &arrangement.edges {
        for t in [0.1, 0.5, 0.9] {
            for sense in [-1.0, 1.0] {
                let point = edge.curve.at(t) + edge.curve.tangent(t).left_normal() * (sense * offset);
                let found = arrangement.part_at(point);
                if point.r <= blur || found == OUTSIDE {
                    continue;
                }
                let part = section.painted_at(point);
                let near_curve = outlines_of(section)
                    .flat_map(Outline::curves)
                    .any(|curve| curve.distance_m(point) <= blur);
                prop_assert!(
                    found == part || near_curve,
                    "at {point}: part {found}, painted {part}"
                );
            }
        }
    }
    Ok(())
}

fn check_against_painting(section: &Section, seed: u64) -> Result<(), TestCaseError> {
    match arrange(section) {
        Ok(arrangement) => {
            arrangement
                .check()
                .map_err(|fault| TestCaseError::fail(fault.to_string()))?;
            check_points(section, &arrangement, seed)?;
            check_beside_edges(section, &arrangement)?;
            let most = WELD_SHARE * drawing_bounds(section).size();
            for weld in &arrangement.welds {
                prop_assert!(weld.moved_m <= 2.0 * most && !weld.regions.is_empty(), "{weld:?}");
            }
            Ok(())
        }
        Err(MeshError::RegionVanished { region, covered_by }) => {
            prop_assert!(!covered_by.contains(&region));
            check_unpainted(section, &region, seed)
        }
        Err(other) => Err(TestCaseError::fail(other.to_string())),
    }
}

/// Nothing of a region is painted, at any of the points drawn at random from its box.
fn check_unpainted(section: &Section, name: &str, seed: u64) -> Result<(), TestCaseError> {
    let mut dice = Dice(seed);
    let mut first = 1;
    for region in &section.regions {
        let last = first + region.copies.len() as u32;
        for outline in region.copies.iter().filter(|_| region.name == name) {
            let bounds = outline.bounds();
            let extent = bounds.high - bounds.low;
            for _ in 0..200 {
                let point = bounds.low + Point::new(dice.next() * extent.r, dice.next() * extent.z);
                let part = section.painted_at(point);
                prop_assert!(!(first..last).contains(&part), "{name} is painted at {point}");
            }
        }
        first = last;
    }
    Ok(())
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 400, ..ProptestConfig::default() })]

    #[test]
    fn any_drawing_is_arranged_as_painted_or_refused(section in sections(12), seed in any::<u64>()) {
        check_against_painting(&section, seed)?;
    }

    // Noise about as large as the weld tolerance, so that some of it is welded and some is drawn.
    #[test]
    fn coarse_noise_is_arranged_too(section in noisy_sections(8, 1e-6), seed in any::<u64>()) {
        check_against_painting(&section, seed)?;
    }

    #[test]
    fn nearly_straight_arcs_are_arranged_too(section in shallow_sections(8), seed in any::<u64>()) {
        check_against_painting(&section, seed)?;
    }

    #[test]
    fn an_outline_is_counter_clockwise_and_its_box_holds_it(outline in outlines(), seed in any::<u64>()) {
        prop_assert!(outline.area_m2() > 0.0);
        let bounds = outline.bounds();
        prop_assert!(bounds.low.r >= -1e-12);
        let mut dice = Dice(seed);
        for _ in 0..50 {
            let point = Point::new(12.0 * dice.next(), 20.0 * dice.next() - 10.0);
            prop_assert!(!outline.contains(point) || bounds.widened(1e-12).contains(point));
        }
    }

    #[test]
    fn the_arrangement_does_not_depend_on_the_run(section in sections(6)) {
        if let Ok(first) = arrange(&section) {
            let second = arrange(&section).unwrap();
            prop_assert_eq!(first.vertices, second.vertices);
            prop_assert_eq!(first.parts, second.parts);
            prop_assert_eq!(first.edges.len(), second.edges.len());
        }
    }
}
