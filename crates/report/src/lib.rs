//! What a calculation hands over: result documents, figures and terminal text.
//!
//! Everything here is drawn from one document; nothing is computed that the document does not hold.
//!
//! - [`LevelsDocument`], [`SweepDocument`], [`ShapeDocument`], [`ParamsDocument`]: versioned JSON
//!   ([`to_json`], [`read_document`]) with a generated JSON Schema ([`schemas`]).
//! - [`CsvWriter`]: one row per point and level (RFC 4180); [`stream_csv`]: the same of a sweep of any length.
//! - [`sweep_figure`], [`levels_figure`]: SVG with real text.
//! - [`figure_png`], [`figure_pdf`], [`outline_text`]: the same as an image, a page, and without fonts.
//! - [`sweep_page`]: one HTML file with the figure, a slider and the orbitals.
//! - [`surfaces_glb`]: orbital surfaces as glTF binary.
//! - [`levels_text`], [`sweep_text`], [`params_text`]: text for a person at a terminal.
//!
//! It is not for: physics, symmetry, following lines, or writing to files and streams.

mod csv_rows;
mod csv_shapes;
mod csv_stream;
mod csv_table;
mod document;
mod draw;
mod export;
mod figure;
mod from_distortion;
mod from_fragments;
mod from_handoff;
mod from_parameters;
mod from_scan;
mod from_scan_bonds;
mod from_scan_lines;
mod from_scan_orbitals;
mod from_scan_pictures;
mod from_scan_populations;
mod from_scan_surfaces;
mod from_scan_why;
mod from_shape;
mod lettering;
mod page;
mod scene;
#[cfg(test)]
mod synthetic;
mod text;

pub use csv_shapes::shape_csv;
pub use csv_stream::{StreamError, Streamed, stream_csv};
pub use csv_table::{CsvError, CsvWriter, levels_csv, sweep_csv};
pub use document::*;
pub use export::{ImageError, figure_pdf, figure_png, outline_text};
pub use figure::{
    ElectronMarks, EndPictures, EnergyUnit, FigureError, FigureOptions, FigureWidth, Follow,
    Numbering, OrbitalPicture, Support, Theme, interaction_figure, levels_figure, shape_figure,
    sweep_figure,
};
pub use from_distortion::distortions_record;
pub use from_fragments::fragments_record;
pub use from_handoff::{plan_document, qcschema_molecule};
pub use from_parameters::params_document;
pub use from_scan::{FromScanError, Provenance, levels_document, sweep_document};
pub use from_scan_bonds::add_populations;
pub use from_scan_orbitals::sweep_document_with_orbitals;
pub use from_scan_pictures::end_pictures;
pub use from_scan_surfaces::{SurfaceChoiceError, named_surfaces};
pub use from_scan_why::why_record;
pub use from_shape::shape_document;
pub use page::{PageError, sweep_page};
pub use scene::{PhaseMesh, SceneError, SurfaceRecord, surfaces_glb};
pub use text::{
    TextOptions, levels_text, params_text, passport_text, plan_markdown, plan_text, shape_text,
    surfaces_text, sweep_fragments_text, sweep_text,
};
