//! Figures as PDF.

use krilla::Document;
use krilla::SerializeSettings;
use krilla::geom::Size;
use krilla::metadata::Metadata;
use krilla::page::PageSettings;
use krilla_svg::{SurfaceExt, SvgSettings};

use super::{ImageError, SVG_PER_INCH, content, drawing};

/// Points of a PDF page per inch (ISO 32000-1, 8.3.2.3).
const POINTS_PER_INCH: f64 = 72.0;

/// A figure of this crate as a PDF page of the drawing's own size: curves stay curves, text can be
/// selected and searched, its font is embedded. Equal figures give equal bytes.
///
/// # Errors
/// Text that is no SVG, or a page that cannot be written.
pub fn figure_pdf(svg: &str) -> Result<Vec<u8>, ImageError> {
    page(svg, true)
}

fn page(svg: &str, compressed: bool) -> Result<Vec<u8>, ImageError> {
    let tree = drawing(svg)?;
    let failed = |what: &str| ImageError::Page(what.to_owned());
    let points = |pixels: f32| (f64::from(pixels) * POINTS_PER_INCH / SVG_PER_INCH) as f32;
    let size = Size::from_wh(points(tree.size().width()), points(tree.size().height()))
        .ok_or_else(|| failed("the drawing has no size"))?;
    let mut document = Document::new_with(SerializeSettings {
        compress_content_streams: compressed,
        ..SerializeSettings::default()
    });
    let mut page = document.start_page_with(PageSettings::new(size));
    let mut surface = page.surface();
    surface
        .draw_svg(&tree, size, SvgSettings::default())
        .ok_or_else(|| failed("the drawing has parts that PDF has not"))?;
    surface.finish();
    page.finish();
    let words = |name: &str| content(svg, name).unwrap_or_default();
    document.set_metadata(
        Metadata::new()
            .title(words("title"))
            .description(words("desc"))
            .creator(format!("orbend {}", env!("CARGO_PKG_VERSION")))
            .language("en".to_owned()),
    );
    document
        .finish()
        .map_err(|error| failed(&format!("{error:?}")))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::{FigureOptions, sweep_figure, synthetic};

    /// The text of a page in the order of its drawing: glyphs of the content stream through the font's
    /// ToUnicode map (ISO 32000-1, 9.10.3), as a reader does it.
    fn text_of(page: &[u8]) -> String {
        let all = String::from_utf8_lossy(page);
        let map = all.split("begincodespacerange").nth(1).expect("a map");
        let map = map.split("endcmap").next().unwrap();
        let mut letters = std::collections::BTreeMap::new();
        for line in map.lines() {
            let hex: Vec<&str> = line
                .split(['<', '>'])
                .map(str::trim)
                .filter(|part| !part.is_empty())
                .collect();
            if let [glyph, letter] = hex.as_slice()
                && let (Ok(glyph), Ok(letter)) = (
                    u16::from_str_radix(glyph, 16),
                    u32::from_str_radix(letter, 16),
                )
            {
                letters.insert(glyph, char::from_u32(letter).unwrap_or('?'));
            }
        }
        let mut text = String::new();
        let mut rest = page;
        while let Some(start) = find(rest, b" Tm(") {
            rest = &rest[start + 4..];
            let mut bytes = Vec::new();
            let mut at = 0;
            while rest[at] != b')' {
                if rest[at] != b'\\' {
                    bytes.push(rest[at]);
                    at += 1;
                } else if rest[at + 1].is_ascii_digit() {
                    let octal = std::str::from_utf8(&rest[at + 1..at + 4]).unwrap();
                    bytes.push(u8::from_str_radix(octal, 8).unwrap());
                    at += 4;
                } else {
                    bytes.push(match rest[at + 1] {
                        b'n' => b'\n',
                        b'r' => b'\r',
                        b't' => b'\t',
                        b'b' => 8,
                        b'f' => 12,
                        other => other,
                    });
                    at += 2;
                }
            }
            for glyph in bytes.chunks_exact(2) {
                let code = u16::from_be_bytes([glyph[0], glyph[1]]);
                text.extend(letters.get(&code));
            }
        }
        text
    }

    fn find(bytes: &[u8], wanted: &[u8]) -> Option<usize> {
        bytes.windows(wanted.len()).position(|part| part == wanted)
    }

    #[test]
    fn a_page_of_the_drawings_size_with_its_font_and_text() {
        let figure =
            sweep_figure(&synthetic::silicon_difluoride(), &FigureOptions::default()).unwrap();
        let small = figure_pdf(&figure).unwrap();
        assert!(small.starts_with(b"%PDF-1.7"));
        assert!(small.trim_ascii_end().ends_with(b"%%EOF"));
        assert_eq!(small, figure_pdf(&figure).unwrap());
        let open = page(&figure, false).unwrap();
        let all = String::from_utf8_lossy(&open);
        // 84 mm.
        let width = all.split("/MediaBox[0 0 ").nth(1).unwrap();
        let width: f64 = width.split(' ').next().unwrap().parse().unwrap();
        assert!((width - 84.0 / 25.4 * 72.0).abs() < 0.01, "{width}");
        assert!(all.contains("+LiberationSans") && all.contains("/FontFile2"));
        assert!(all.contains("/ToUnicode"));
        let text = text_of(&open);
        for words in [
            "SiF2",
            "orbital energy / eV",
            "F–Si–F angle / °",
            "HOMO–LUMO gap",
            "3πu",
            "8a1",
            "−20",
        ] {
            assert!(text.contains(words), "{words} in {text}");
        }
    }

    #[test]
    fn outlines_leave_no_font() {
        let figure =
            sweep_figure(&synthetic::silicon_difluoride(), &FigureOptions::default()).unwrap();
        let outlined = crate::outline_text(&figure).unwrap();
        let page = page(&outlined, false).unwrap();
        assert!(find(&page, b"LiberationSans").is_none());
        assert!(matches!(
            figure_pdf("no drawing"),
            Err(ImageError::Drawing(_))
        ));
    }
}
