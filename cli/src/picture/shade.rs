//! |B| as a raster under the drawing: small, and smooth at every print size.

use base64::Engine;

use super::sheet::Sheet;
use super::tint;
use super::view::View;

/// Pixels per page unit.
const FINENESS: f64 = 1.6;
/// Samples per pixel along each side.
const SAMPLES: usize = 2;
/// Share of the picture that may be beyond the top of the scale: corners have no bound.
const BEYOND_TOP: f64 = 0.003;

/// The raster and its scale.
#[derive(Debug)]
pub struct Shade {
    /// A PNG in base64.
    pub png_base64: String,
    /// |B| at the dark end, T; larger is as dark.
    pub top_t: f64,
}

/// Shades the described half section; `None` where there is no field at all or the library fails.
pub fn shade(sheet: &Sheet, view: &View) -> Option<Shade> {
    let width = (view.half_width() * FINENESS).ceil().max(1.0) as usize;
    let height = (view.described_height() * FINENESS).ceil().max(1.0) as usize;
    let samples = sample(sheet, view, width * SAMPLES, height * SAMPLES);
    let pixels = average(&samples, width, height);
    let top_t = top(&pixels)?;
    // 0 is transparent, 1 to 255 run along the ramp.
    let index = |b: &f32| {
        if b.is_nan() {
            0
        } else {
            1 + (254.0 * (f64::from(*b) / top_t).min(1.0)).round() as u8
        }
    };
    let bytes: Vec<u8> = pixels.iter().map(index).collect();
    let png = encode(&bytes, width as u32, height as u32).ok()?;
    Some(Shade {
        png_base64: base64::engine::general_purpose::STANDARD.encode(png),
        top_t,
    })
}

/// |B| at every sample point; NaN where no triangle lies.
fn sample(sheet: &Sheet, view: &View, columns: usize, rows: usize) -> Vec<f32> {
    let mut samples = vec![f32::NAN; columns * rows];
    let per_unit = [
        columns as f64 / view.half_width(),
        rows as f64 / view.described_height(),
    ];
    for (corners, b) in sheet.triangles.iter().zip(&sheet.corner_b_t) {
        let p = corners.map(|node| {
            let [x, y] = view.page(sheet.nodes[node as usize]);
            [x * per_unit[0] - 0.5, y * per_unit[1] - 0.5]
        });
        fill(&mut samples, columns, rows, p, b.map(|[r, z]| r.hypot(z)));
    }
    samples
}

/// Fills the sample points in a triangle with the linear interpolation of its corners' values.
fn fill(samples: &mut [f32], columns: usize, rows: usize, p: [[f64; 2]; 3], b: [f32; 3]) {
    let doubled_area = (p[1][0] - p[0][0]) * (p[2][1] - p[0][1]) - (p[2][0] - p[0][0]) * (p[1][1] - p[0][1]);
    if doubled_area == 0.0 {
        return;
    }
    let extent = |axis: usize, most: usize| {
        let low = p
            .iter()
            .map(|p| p[axis])
            .fold(f64::INFINITY, f64::min)
            .ceil()
            .max(0.0);
        let high = p
            .iter()
            .map(|p| p[axis])
            .fold(f64::NEG_INFINITY, f64::max)
            .floor()
            .min(most as f64 - 1.0);
        (low, high)
    };
    let ((left, right), (top, bottom)) = (extent(0, columns), extent(1, rows));
    if left > right || top > bottom {
        return;
    }
    let share = |i: usize, j: usize, x: f64, y: f64| {
        ((p[j][0] - p[i][0]) * (y - p[i][1]) - (x - p[i][0]) * (p[j][1] - p[i][1])) / doubled_area
    };
    for row in top as usize..=bottom as usize {
        for column in left as usize..=right as usize {
            let (x, y) = (column as f64, row as f64);
            let shares = [share(1, 2, x, y), share(2, 0, x, y), share(0, 1, x, y)];
            if shares.iter().all(|share| *share >= -1e-9) {
                let value = (0..3).map(|k| shares[k] as f32 * b[k]).sum::<f32>();
                samples[row * columns + column] = value;
            }
        }
    }
}

/// Means of the samples of each pixel that lie on a triangle.
fn average(samples: &[f32], width: usize, height: usize) -> Vec<f32> {
    let columns = width * SAMPLES;
    let mut pixels = Vec::with_capacity(width * height);
    for row in 0..height {
        for column in 0..width {
            let (mut sum, mut count) = (0.0, 0.0);
            for j in 0..SAMPLES {
                let start = (row * SAMPLES + j) * columns + column * SAMPLES;
                for value in samples[start..start + SAMPLES]
                    .iter()
                    .filter(|value| !value.is_nan())
                {
                    sum += value;
                    count += 1.0;
                }
            }
            pixels.push(if count > 0.0 { sum / count } else { f32::NAN });
        }
    }
    pixels
}

/// The round number at the dark end.
fn top(pixels: &[f32]) -> Option<f64> {
    let mut seen: Vec<f32> = pixels.iter().copied().filter(|b| !b.is_nan()).collect();
    let place = ((1.0 - BEYOND_TOP) * seen.len() as f64) as usize;
    let place = place.min(seen.len().checked_sub(1)?);
    let (_, most, _) = seen.select_nth_unstable_by(place, f32::total_cmp);
    (*most > 0.0 && most.is_finite()).then(|| round_up(f64::from(*most)))
}

/// The next number with one or two plain digits.
fn round_up(value: f64) -> f64 {
    let decade = 10f64.powf(value.log10().floor());
    let steps = [1.0, 1.2, 1.6, 2.0, 2.4, 3.0, 4.0, 5.0, 6.0, 8.0, 10.0];
    decade
        * steps
            .into_iter()
            .find(|step| step * decade >= value * (1.0 - 1e-9))
            .unwrap_or(10.0)
}

fn encode(indices: &[u8], width: u32, height: u32) -> Result<Vec<u8>, png::EncodingError> {
    let palette: Vec<u8> = std::iter::once([255; 3])
        .chain((0..=254).map(|k| tint::ramp(f64::from(k) / 254.0)))
        .flatten()
        .collect();
    let mut bytes = Vec::new();
    let mut encoder = png::Encoder::new(&mut bytes, width, height);
    encoder.set_color(png::ColorType::Indexed);
    encoder.set_depth(png::BitDepth::Eight);
    encoder.set_palette(palette);
    encoder.set_trns(vec![0]);
    encoder.set_compression(png::Compression::Balanced);
    encoder.set_filter(png::Filter::Adaptive);
    let mut writer = encoder.write_header()?;
    writer.write_image_data(indices)?;
    writer.finish()?;
    Ok(bytes)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_scale_ends_on_a_round_number() {
        assert_eq!(
            [0.0831, 1.0, 1.21, 7.0]
                .map(round_up)
                .map(|top| (1e4 * top).round()),
            [1000.0, 10_000.0, 16_000.0, 80_000.0]
        );
    }

    #[test]
    fn a_triangle_is_filled_with_its_linear_values() {
        let mut samples = vec![f32::NAN; 25];
        fill(
            &mut samples,
            5,
            5,
            [[0.0, 0.0], [4.0, 0.0], [0.0, 4.0]],
            [0.0, 4.0, 8.0],
        );
        assert_eq!(samples.iter().filter(|value| !value.is_nan()).count(), 15);
        assert!((samples[5 + 2] - 4.0).abs() < 1e-5, "{}", samples[7]);
    }
}
