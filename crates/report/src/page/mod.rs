//! The page: one HTML file with the figure, a slider along the coordinate, the levels, their
//! composition and their orbitals. It needs no network and no server; without script the figure and
//! a table of the lines remain.

mod data;
mod markup;
#[cfg(test)]
mod tests;

use data_encoding::BASE64;
use sha2::{Digest, Sha256};

use crate::document::SweepDocument;
use crate::figure::sweep::compose;
use crate::figure::{FigureError, FigureOptions, FigureWidth, Follow, Theme};

/// Pages larger than this (bytes) are refused: browsers become slow with them.
const LARGEST: usize = 20_000_000;

const STYLE: &str = include_str!("page.css");
/// Evaluation and drawing of orbitals, the diagram with its cursor, then the page itself.
const SCRIPT: [&str; 3] = [
    include_str!("orbital.js"),
    include_str!("stage.js"),
    include_str!("page.js"),
];

/// Why a page cannot be made.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum PageError {
    /// The figure on it cannot be drawn.
    #[error(transparent)]
    Figure(#[from] FigureError),
    /// The data could not be written.
    #[error("the page's data could not be written: {0}")]
    Data(String),
    /// It would be too large.
    #[error(
        "the page would hold {:.1} MB, more than {} MB: leave out lines (--lines), or take a larger step \
         ({points} points now)",
        *.bytes as f64 / 1e6, LARGEST / 1_000_000
    )]
    TooLarge {
        /// Its size in bytes.
        bytes: usize,
        /// Points of the sweep.
        points: usize,
    },
}

/// The page of a sweep along one coordinate as HTML (UTF-8, no outside reference, closed to the
/// network by its own content policy). Orbitals are shown where the document holds coefficients.
/// Width, theme and view of the options do not count: the page has its own. Equal documents and options
/// give equal bytes.
///
/// # Errors
/// What [`FigureError`] says, or a page of more than 20 MB.
pub fn sweep_page(document: &SweepDocument, options: &FigureOptions) -> Result<String, PageError> {
    let options = FigureOptions {
        width: FigureWidth::Page,
        theme: Theme::Light,
        title: false,
        pictures: None,
        follow: Follow::Energy,
        ..options.clone()
    };
    // A telephone shows the figure at the width of a column.
    let narrow_options = FigureOptions {
        width: FigureWidth::Column,
        id_prefix: format!("{}-narrow", options.id_prefix),
        ..options.clone()
    };
    let wide = compose(document, &options)?;
    let narrow = compose(document, &narrow_options)?;
    let data = data::PageData::new(document, &options, [&wide, &narrow]);
    let json = serde_json::to_string(&data).map_err(|error| PageError::Data(error.to_string()))?;
    let [figure, narrow] = [wide, narrow].map(|canvas| without_metadata(canvas.xml.finish()));
    let style = format!("{STYLE}{}", markup::dark_figure());
    let script = SCRIPT.concat();
    let policy = format!(
        "default-src 'none'; style-src '{}'; script-src '{}'; base-uri 'none'; form-action 'none'",
        digest(&style),
        digest(&script)
    );
    let page = markup::page(&markup::Parts {
        document,
        options: &options,
        policy: &policy,
        style: &style,
        script: &script,
        figure: &figure,
        narrow: &narrow,
        // A data block ends at "</script": "<" never stands in it.
        json: &json.replace('<', "\\u003c"),
    });
    if page.len() > LARGEST {
        return Err(PageError::TooLarge {
            bytes: page.len(),
            points: document.points.len(),
        });
    }
    Ok(page)
}

/// The figure's data are on the page already.
fn without_metadata(figure: String) -> String {
    match (figure.find("<metadata"), figure.find("</metadata>")) {
        (Some(from), Some(to)) => format!("{}{}", &figure[..from], figure[to + 11..].trim_start()),
        _ => figure,
    }
}

/// A source hash of the content policy (W3C CSP 3).
fn digest(text: &str) -> String {
    format!(
        "sha256-{}",
        BASE64.encode(&Sha256::digest(text.as_bytes())[..])
    )
}
