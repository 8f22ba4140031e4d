//! Other forms of a figure, all made from its SVG text and set in one embedded font, so that they look
//! the same everywhere: PNG, PDF, and SVG with its text as outlines.

mod outline;
mod pdf;
mod png;

pub use outline::outline_text;
pub use pdf::figure_pdf;
pub use png::figure_png;

use std::sync::Arc;

use resvg::usvg;

/// Liberation Sans 2.1.5 (SIL Open Font License 1.1, `fonts/LICENSE-OFL.txt`): the letter widths that
/// the layout reckons with.
const FONT: &[u8] = include_bytes!("../../fonts/LiberationSans-Regular.ttf");
const FAMILY: &str = "Liberation Sans";

/// Pixels per inch of an SVG pixel (CSS 2.1).
const SVG_PER_INCH: f64 = 96.0;

/// Why a figure cannot become an image, a PDF page or a drawing without fonts.
#[derive(Debug, thiserror::Error)]
#[non_exhaustive]
pub enum ImageError {
    /// The drawing cannot be read.
    #[error("the drawing cannot be read: {0}")]
    Drawing(#[from] usvg::Error),
    /// The image has no pixels or too many.
    #[error(
        "an image of {width} by {height} pixels cannot be made; choose another number of dots per inch (at most 16384 pixels along an edge)"
    )]
    Size {
        /// Pixels across.
        width: u32,
        /// Pixels down.
        height: u32,
    },
    /// The image could not be written.
    #[error("the image could not be written: {0}")]
    Encoding(#[from] ::png::EncodingError),
    /// The page could not be written.
    #[error("the PDF page could not be written: {0}")]
    Page(String),
    /// Some text of the drawing has no outline.
    #[error("{found} of the drawing's {texts} texts have outlines")]
    Outlines {
        /// Texts with outlines.
        found: usize,
        /// Texts of the drawing.
        texts: usize,
    },
}

/// The drawing behind a figure's SVG text, set in the embedded font.
fn drawing(svg: &str) -> Result<usvg::Tree, ImageError> {
    let mut options = usvg::Options {
        font_family: FAMILY.to_owned(),
        ..usvg::Options::default()
    };
    let fonts = Arc::make_mut(&mut options.fontdb);
    fonts.load_font_data(FONT.to_vec());
    fonts.set_sans_serif_family(FAMILY);
    Ok(usvg::Tree::from_str(svg, &options)?)
}

/// The text of the first element of this name, as it was before it was escaped.
fn content(svg: &str, name: &str) -> Option<String> {
    let (_, rest) = svg.split_once(&format!("<{name}"))?;
    let (_, rest) = rest.split_once('>')?;
    let (text, _) = rest.split_once(&format!("</{name}>"))?;
    Some(
        text.replace("&lt;", "<")
            .replace("&gt;", ">")
            .replace("&quot;", "\"")
            .replace("&amp;", "&"),
    )
}
