//! Figures as PNG.

use png::{BitDepth, ColorType, Encoder, PixelDimensions, Unit};
use resvg::tiny_skia;

use super::{ImageError, SVG_PER_INCH, drawing};

const INCHES_PER_METRE: f64 = 1.0 / 0.0254;

/// A figure of this crate as PNG (24-bit colour, its resolution stated) with so many dots per inch;
/// 600 is what journals ask for.
///
/// # Errors
/// Text that is no SVG, or an image without pixels or with more than 16384 of them along an edge.
pub fn figure_png(svg: &str, dots_per_inch: f64) -> Result<Vec<u8>, ImageError> {
    let tree = drawing(svg)?;
    let scale = dots_per_inch / SVG_PER_INCH;
    let pixels = |length: f32| (f64::from(length) * scale).round() as u32;
    let (width, height) = (pixels(tree.size().width()), pixels(tree.size().height()));
    let refused = ImageError::Size { width, height };
    if width.max(height) > 16384 {
        return Err(refused);
    }
    let mut pixmap = tiny_skia::Pixmap::new(width, height).ok_or(refused)?;
    pixmap.fill(tiny_skia::Color::WHITE);
    let transform = tiny_skia::Transform::from_scale(
        width as f32 / tree.size().width(),
        height as f32 / tree.size().height(),
    );
    resvg::render(&tree, transform, &mut pixmap.as_mut());
    encode(&pixmap, dots_per_inch)
}

fn encode(pixmap: &tiny_skia::Pixmap, dots_per_inch: f64) -> Result<Vec<u8>, ImageError> {
    let mut bytes = Vec::new();
    let mut encoder = Encoder::new(&mut bytes, pixmap.width(), pixmap.height());
    encoder.set_color(ColorType::Rgb);
    encoder.set_depth(BitDepth::Eight);
    let per_metre = (dots_per_inch * INCHES_PER_METRE).round() as u32;
    encoder.set_pixel_dims(Some(PixelDimensions {
        xppu: per_metre,
        yppu: per_metre,
        unit: Unit::Meter,
    }));
    // The ground is opaque: colour times opacity is the colour.
    let colours: Vec<u8> = pixmap
        .data()
        .chunks_exact(4)
        .flat_map(|pixel| [pixel[0], pixel[1], pixel[2]])
        .collect();
    let mut writer = encoder.write_header()?;
    writer.write_image_data(&colours)?;
    writer.finish()?;
    Ok(bytes)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::{FigureOptions, sweep_figure, synthetic};

    fn decoded(bytes: &[u8]) -> (u32, u32, Vec<u8>) {
        let mut reader = png::Decoder::new(std::io::Cursor::new(bytes))
            .read_info()
            .unwrap();
        let mut pixels = vec![0; reader.output_buffer_size().unwrap()];
        let info = reader.next_frame(&mut pixels).unwrap();
        (info.width, info.height, pixels)
    }

    fn dark(svg: &str) -> usize {
        let (_, _, pixels) = decoded(&figure_png(svg, 96.0).unwrap());
        pixels
            .chunks_exact(3)
            .filter(|pixel| pixel[0] < 100)
            .count()
    }

    #[test]
    fn text_shows_with_every_letter_that_figures_use() {
        let text = |text: &str| {
            dark(&format!(
                "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"100\" height=\"40\" \
                 font-family=\"Helvetica, sans-serif\"><text x=\"5\" y=\"30\" font-size=\"30\">{text}</text></svg>"
            ))
        };
        assert_eq!(text(" "), 0);
        // A letter that the font lacks is drawn as nothing or as the same empty box.
        let lacking = text("\u{E000}");
        for letter in "a2σπδφγΔΣ∞°Å–′″↑↓\u{2212}+".chars() {
            let shown = text(&letter.to_string());
            assert!(shown > 5 && shown != lacking, "{letter}: {shown}");
        }
    }

    #[test]
    fn a_column_at_600_dots_per_inch() {
        let figure =
            sweep_figure(&synthetic::silicon_difluoride(), &FigureOptions::default()).unwrap();
        let bytes = figure_png(&figure, 600.0).unwrap();
        let (width, _, _) = decoded(&bytes);
        // 84 mm.
        assert_eq!(width, 1984);
        let without = figure
            .split("<text")
            .map(|part| part.split_once("</text>").map_or(part, |p| p.1))
            .collect::<String>();
        assert!(dark(&figure) > dark(&without) + 500);
    }

    #[test]
    fn too_many_pixels_are_refused() {
        let figure =
            sweep_figure(&synthetic::silicon_difluoride(), &FigureOptions::default()).unwrap();
        assert!(matches!(
            figure_png(&figure, 60_000.0),
            Err(ImageError::Size { .. })
        ));
        assert!(matches!(
            figure_png("no drawing", 96.0),
            Err(ImageError::Drawing(_))
        ));
    }
}
