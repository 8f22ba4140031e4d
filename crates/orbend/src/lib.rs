//! Which way does a molecule bend, which orbitals trade places on the way, and how far can that be
//! trusted: the library behind the command line.
//!
//! A [`Request`] holds a molecule, what moves and the model; it is checked into a [`SweepPlan`] and
//! run to a typed [`Sweep`], from which the documents, tables and figures of the command line are made.
//!
//! ```
//! use orbend::{Coordinate, CoordinateKind, Formula, Request, ideal_geometry};
//!
//! let sulfide = ideal_geometry(&Formula::parse("H2S")?, None, &[])?.molecule;
//! let bend = Coordinate::parse(CoordinateKind::Bend, "2-1-3=90..180:10")?;
//! let sweep = Request::new(sulfide).coordinate(bend).run()?;
//!
//! assert_eq!(sweep.plan().path_group().name, "C2v");
//! let last = sweep.point(sweep.points() - 1)?;
//! assert_eq!(last.point_group, "Dinfh");
//! let frontier = last.levels.iter().rfind(|level| level.occupation > 0.0);
//! assert_eq!(frontier.map(|level| level.full_name.plain.as_str()), Some("2pi_u"));
//! # Ok::<(), Box<dyn std::error::Error>>(())
//! ```
//!
//! A document, as `--json` prints it:
//!
//! ```
//! use orbend::{Provenance, Request, levels_document, read_xyz, to_json};
//!
//! let text = "3\nwater\nO 0 0 0.119\nH 0 0.763 -0.477\nH 0 -0.763 -0.477\n";
//! let water = read_xyz(text, &Default::default())?.remove(0).molecule;
//! let sweep = Request::new(water).run()?;
//! let json = to_json(&levels_document(&sweep, &Provenance::default())?)?;
//! assert!(json.contains("orbend/levels/1"));
//! # Ok::<(), Box<dyn std::error::Error>>(())
//! ```
//!
//! Lengths are in Å, angles in degrees, energies in eV. Nothing here prints, exits or reads a file.

pub use orbend_hamiltonian::{Coupling, Method, ParameterError, ParameterSet};
pub use orbend_report::{
    CsvError, Document, DocumentError, FigureError, FigureOptions, FigureWidth, FromScanError,
    LevelsDocument, ParamsDocument, PlanDocument, Provenance, ShapeDocument, SweepDocument,
    TextOptions, Theme, levels_csv, levels_document, levels_figure, levels_text, params_document,
    params_text, plan_document, plan_markdown, plan_text, read_document, schemas, sweep_csv,
    sweep_document, sweep_figure, sweep_text, to_json,
};
pub use orbend_scan::reasons::{Distortions, HandOff};
pub use orbend_scan::{
    Configuration, Electrons, Filling, FillingError, Level, LineHead, Name, Numbering, Orbitals,
    Point, Populations, Request, ScanError, Sweep, SweepPlan,
};
pub use orbend_structure::{
    Angstrom, BondOverride, BondOverrideError, Coordinate, CoordinateError, CoordinateKind,
    Element, Formula, FormulaError, Frame, IdealGeometry, LengthUnit, Molecule, MoleculeError,
    PathError, Range, RangeError, XyzError, XyzOptions, ideal_geometry, read_xyz, read_xyz_bytes,
    write_xyz,
};
pub use orbend_symmetry::PointGroup;
