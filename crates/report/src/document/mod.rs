//! The result documents and how they are written, read and described.

mod common;
mod distortion;
mod fragments;
mod levels;
mod number;
mod params;
mod plan;
mod qcschema;
mod read;
mod schema;
mod shape;
mod sweep;
#[cfg(test)]
mod tests;
mod why;
mod write;

pub use common::{
    AtomPosition, BasisFunction, BondLength, Checked, Geometry, Method, Missing, MoleculeRecord,
    Program, ShellValues, Units, Warning,
};
pub use distortion::{DistortionsRecord, HintRecord, TrialRecord};
pub use fragments::{
    FragmentLevelRecord, FragmentOrbitalRecord, FragmentPairRecord, FragmentRecord, FragmentsRecord,
};
pub use levels::{
    AtomCharge, LevelRecord, LevelsDocument, NearMiss, OverlapPopulation, Point, ShellPopulation,
    SymmetryRecord,
};
pub use number::{NotFinite, Number};
pub use params::{ParamsDocument, Variant};
pub use plan::{
    ActiveLine, ActiveSpace, ChargeRecord, IrrepCount, PlanDocument, RootFlip, SpaceStop,
    StartGeometry, StateRecord,
};
pub use qcschema::{QcMolecule, QcProvenance};
pub use read::{Document, DocumentError, read_document};
pub use schema::{LevelsSchema, ParamsSchema, PlanSchema, ShapeSchema, SweepSchema, schemas};
pub use shape::{Argument, Case, Curve, Ensemble, Flip, ShapeDocument};
pub use sweep::{
    Certificate, CertificateInterval, CertificateKind, CoordinateRecord, CoordinateUnit,
    CrossingKind, CrossingRecord, CrossingSearch, FollowedRecord, LineRecord, MotionKind, Passport,
    SpecialLabel, SumMinimum, SweepDocument,
};
pub use why::{MixingTerm, PairTerm, SlopeRecord, WhyRecord};
pub use write::to_json;
