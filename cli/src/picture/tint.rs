//! One hue from paper to dark: our ramp for |B|, and the flat tints of a drawing.
//!
//! Lightness falls evenly in OKLCH (Ottosson 2020), so that equal steps look equal and the picture keeps its meaning
//! when it is printed in grey.

/// Hue of everything, degrees: the brown of a varnished wire.
const HUE_DEG: f64 = 68.0;
/// Lightness at nothing and at the top of the scale.
const LIGHTNESS: [f64; 2] = [0.985, 0.42];
/// Chroma at nothing and at its strongest.
const CHROMA: [f64; 2] = [0.003, 0.115];

/// Ink of outlines and words.
pub const INK: &str = "#241c15";
/// Paper.
pub const PAPER: &str = "#fffdfa";

/// Red, green, blue at a share (0 to 1) of the scale.
pub fn ramp(share: f64) -> [u8; 3] {
    let share = share.clamp(0.0, 1.0);
    let lightness = LIGHTNESS[0] + (LIGHTNESS[1] - LIGHTNESS[0]) * share;
    // Strongest at two thirds; very light and very dark colours cannot hold much of it.
    let swell = (share * (2.0 - share)).powf(0.9);
    let chroma = CHROMA[0] + (CHROMA[1] - CHROMA[0]) * swell * (1.0 - 0.35 * share * share);
    srgb(lightness, chroma, HUE_DEG)
}

/// The same as a word for SVG.
pub fn ramp_word(share: f64) -> String {
    let [r, g, b] = ramp(share);
    format!("#{r:02x}{g:02x}{b:02x}")
}

/// OKLCH to sRGB (Ottosson 2020).
fn srgb(lightness: f64, chroma: f64, hue_deg: f64) -> [u8; 3] {
    let (sin, cos) = hue_deg.to_radians().sin_cos();
    let (a, b) = (chroma * cos, chroma * sin);
    let l = (lightness + 0.396_337_777_4 * a + 0.215_803_757_3 * b).powi(3);
    let m = (lightness - 0.105_561_345_8 * a - 0.063_854_172_8 * b).powi(3);
    let s = (lightness - 0.089_484_177_5 * a - 1.291_485_548_0 * b).powi(3);
    let linear = [
        4.076_741_662_1 * l - 3.307_711_591_3 * m + 0.230_969_929_2 * s,
        -1.268_438_004_6 * l + 2.609_757_401_1 * m - 0.341_319_396_5 * s,
        -0.004_196_086_3 * l - 0.703_418_614_7 * m + 1.707_614_701_0 * s,
    ];
    linear.map(|x| {
        let x = x.clamp(0.0, 1.0);
        let encoded = if x <= 0.003_130_8 {
            12.92 * x
        } else {
            1.055 * x.powf(1.0 / 2.4) - 0.055
        };
        (255.0 * encoded).round() as u8
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn darkens_steadily_in_grey() {
        let grey = |[r, g, b]: [u8; 3]| 0.2126 * f64::from(r) + 0.7152 * f64::from(g) + 0.0722 * f64::from(b);
        let greys: Vec<f64> = (0..=64).map(|k| grey(ramp(f64::from(k) / 64.0))).collect();
        assert!(greys.windows(2).all(|pair| pair[1] < pair[0]), "{greys:?}");
        assert!(greys[0] > 245.0 && greys[64] < 95.0, "{} {}", greys[0], greys[64]);
    }
}
