//! From metres of the half section to the page: a full section, the axis upright in its middle.

use mesher::curve::Bounds;
use mesher::{Point, Section};

/// Most room for the section, page units.
const MOST: [f64; 2] = [640.0, 760.0];
/// Air shown around the parts, as a share of the device's larger extent.
const MARGIN: f64 = 0.22;

/// What part of the half section is shown, and how large. The page's origin is the axis at the top of the window;
/// x runs right, y down.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct View {
    /// Page units per metre.
    pub scale: f64,
    /// Largest r shown, m.
    pub reach_m: f64,
    /// Highest z shown, m.
    pub top_m: f64,
    /// Lowest z shown of the described section, m: with a mirror, the mirror.
    pub bottom_m: f64,
    /// The mirror, m: what lies below is an image.
    pub mirror_m: Option<f64>,
}

impl View {
    /// The window around all parts (`parts`: the box around them), within the wall if there is one.
    pub fn of(section: &Section, parts: Bounds) -> Self {
        let mirror_m = section.mirror_z_m;
        let height = match mirror_m {
            Some(mirror) => 2.0 * (parts.high.z - mirror),
            None => parts.high.z - parts.low.z,
        };
        let margin = MARGIN * height.max(2.0 * parts.high.r);
        let (mut reach_m, mut top_m) = (parts.high.r + margin, parts.high.z + margin);
        let mut bottom_m = mirror_m.unwrap_or(parts.low.z - margin);
        if let mesher::section::SpaceEdge::Wall(wall) = &section.edge {
            let wall = wall.bounds();
            reach_m = reach_m.min(wall.high.r);
            top_m = top_m.min(wall.high.z);
            bottom_m = bottom_m.max(wall.low.z);
        }
        let shown = top_m - mirror_m.map_or(bottom_m, |mirror| 2.0 * mirror - top_m);
        let scale = (0.5 * MOST[0] / reach_m).min(MOST[1] / shown);
        Self {
            scale,
            reach_m,
            top_m,
            bottom_m,
            mirror_m,
        }
    }

    /// A point on the page.
    pub fn page(&self, p: Point) -> [f64; 2] {
        [p.r * self.scale, (self.top_m - p.z) * self.scale]
    }

    /// Half the width of the section on the page.
    pub fn half_width(&self) -> f64 {
        self.reach_m * self.scale
    }

    /// Height of the described section on the page.
    pub fn described_height(&self) -> f64 {
        (self.top_m - self.bottom_m) * self.scale
    }

    /// Height of the whole section on the page, the image below a mirror included.
    pub fn height(&self) -> f64 {
        if self.mirror_m.is_some() {
            2.0 * self.described_height()
        } else {
            self.described_height()
        }
    }

    /// Whether a triangle with these corners can be seen.
    pub fn shows(&self, corners: &[Point; 3]) -> bool {
        corners.iter().any(|p| p.r < self.reach_m)
            && corners.iter().any(|p| p.z < self.top_m)
            && corners.iter().any(|p| p.z > self.bottom_m)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn shows_all_parts_with_air_around_within_the_wall() {
        let case = crate::sample::case();
        let parts = Bounds {
            low: Point::new(0.0, 0.0),
            high: Point::new(0.010, 0.020),
        };
        let view = View::of(&case.section, parts);
        assert!((view.reach_m - 0.0144).abs() < 1e-12 && (view.bottom_m + 0.0044).abs() < 1e-12);
        assert_eq!(view.page(Point::new(0.0, view.top_m)), [0.0, 0.0]);
        assert!(view.height() <= MOST[1] + 1e-9 && 2.0 * view.half_width() <= MOST[0] + 1e-9);
        let wide = Bounds {
            low: Point::new(0.0, -0.013),
            high: Point::new(0.024, 0.03),
        };
        assert_eq!(View::of(&case.section, wide).reach_m, 0.024);
    }

    #[test]
    fn doubles_at_a_mirror() {
        let mut section = crate::sample::case().section;
        section.mirror_z_m = Some(0.0);
        let parts = Bounds {
            low: Point::new(0.0, 0.0),
            high: Point::new(0.010, 0.020),
        };
        let view = View::of(&section, parts);
        assert_eq!(view.bottom_m, 0.0);
        assert!((view.height() - 2.0 * view.described_height()).abs() < 1e-12);
    }
}
