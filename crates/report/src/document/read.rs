//! Reading documents back, and what has to hold inside one.

use serde::de::DeserializeOwned;

use super::schema::{LevelsSchema, ParamsSchema, PlanSchema, ShapeSchema, SweepSchema};
use super::{LevelsDocument, ParamsDocument, PlanDocument, Point, ShapeDocument, SweepDocument};

/// A document of any form.
#[derive(Clone, Debug, PartialEq)]
pub enum Document {
    /// One geometry.
    Levels(Box<LevelsDocument>),
    /// A sweep or grid.
    Sweep(Box<SweepDocument>),
    /// Shape verdicts.
    Shape(Box<ShapeDocument>),
    /// Parameter values.
    Params(Box<ParamsDocument>),
    /// A hand-off.
    Plan(Box<PlanDocument>),
}

/// Why a document cannot be read, written or used.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[non_exhaustive]
pub enum DocumentError {
    /// Not JSON, or not of the form it claims.
    #[error("line {line}, column {column}: {cause}")]
    Form {
        /// Line, counted from 1; 0 where no text was read.
        line: usize,
        /// Column, counted from 1; 0 where no text was read.
        column: usize,
        /// What is wrong.
        cause: String,
    },
    /// The text has no `schema` that this version knows.
    #[error(
        "unknown schema \"{0}\": this version reads orbend/{{levels,sweep,shape,params,plan}}/1"
    )]
    UnknownSchema(String),
    /// Parts of the document contradict each other.
    #[error("{place}: {cause}")]
    Inconsistent {
        /// JSON pointer (RFC 6901) to the place.
        place: String,
        /// What is wrong.
        cause: String,
    },
    /// The text is not UTF-8.
    #[error("the document is not UTF-8")]
    NotUtf8,
}

impl DocumentError {
    pub(crate) fn from_serde(error: serde_json::Error) -> Self {
        let text = error.to_string();
        let cause = text.split(" at line ").next().unwrap_or(&text).to_owned();
        Self::Form {
            line: error.line(),
            column: error.column(),
            cause,
        }
    }

    fn at(place: String, cause: String) -> Self {
        Self::Inconsistent { place, cause }
    }
}

/// Reads a document of any form and checks it. Unknown keys are passed over: later versions of the
/// same form may add some.
pub fn read_document(text: &str) -> Result<Document, DocumentError> {
    #[derive(serde::Deserialize)]
    struct Head {
        schema: String,
    }
    let head: Head = parse(text)?;
    match head.schema.as_str() {
        LevelsSchema::NAME => LevelsDocument::from_json(text).map(|d| Document::Levels(d.into())),
        SweepSchema::NAME => SweepDocument::from_json(text).map(|d| Document::Sweep(d.into())),
        ShapeSchema::NAME => ShapeDocument::from_json(text).map(|d| Document::Shape(d.into())),
        ParamsSchema::NAME => ParamsDocument::from_json(text).map(|d| Document::Params(d.into())),
        PlanSchema::NAME => PlanDocument::from_json(text).map(|d| Document::Plan(d.into())),
        _ => Err(DocumentError::UnknownSchema(head.schema)),
    }
}

fn parse<D: DeserializeOwned>(text: &str) -> Result<D, DocumentError> {
    serde_json::from_str(text).map_err(DocumentError::from_serde)
}

impl PlanDocument {
    /// Reads and checks a document of this form.
    pub fn from_json(text: &str) -> Result<Self, DocumentError> {
        let document: Self = parse(text)?;
        document.check()?;
        Ok(document)
    }

    /// Checks that every state and every line of a space names something that exists.
    pub fn check(&self) -> Result<(), DocumentError> {
        for (index, state) in self.states.iter().enumerate() {
            if state.start as usize >= self.starts.len() {
                let place = format!("/states/{index}/start");
                let cause = format!("there are {} start geometries", self.starts.len());
                return Err(DocumentError::at(place, cause));
            }
        }
        for (index, space) in self.active_spaces.iter().enumerate() {
            if space.orbitals as usize != space.lines.len() {
                let cause = format!(
                    "{} lines for {} orbitals",
                    space.lines.len(),
                    space.orbitals
                );
                return Err(DocumentError::at(format!("/active_spaces/{index}"), cause));
            }
        }
        Ok(())
    }
}

impl LevelsDocument {
    /// Reads and checks a document of this form.
    pub fn from_json(text: &str) -> Result<Self, DocumentError> {
        let document: Self = parse(text)?;
        document.check()?;
        Ok(document)
    }

    /// Checks that the parts agree: exactly one point, levels in order of energy.
    pub fn check(&self) -> Result<(), DocumentError> {
        if self.points.len() != 1 {
            let cause = format!("{} points, expected exactly one", self.points.len());
            return Err(DocumentError::at("/points".to_owned(), cause));
        }
        check_points(&self.points, 0, self.molecule.elements.len())
    }
}

impl SweepDocument {
    /// Reads and checks a document of this form.
    pub fn from_json(text: &str) -> Result<Self, DocumentError> {
        let document: Self = parse(text)?;
        document.check()?;
        Ok(document)
    }

    /// Whether this is a grid over two coordinates.
    #[must_use]
    pub fn is_grid(&self) -> bool {
        self.coordinates.len() > 1
    }

    /// Checks that the parts agree: every point has all coordinates and its levels in order of
    /// energy, every line has one entry per point, every reference to a line is to one that exists.
    pub fn check(&self) -> Result<(), DocumentError> {
        check_points(
            &self.points,
            self.coordinates.len(),
            self.molecule.elements.len(),
        )?;
        let lines = self.lines.as_deref().unwrap_or_default();
        let ids: Vec<u32> = lines.iter().map(|line| line.id).collect();
        for (index, line) in lines.iter().enumerate() {
            let place = format!("/lines/{index}");
            if ids[..index].contains(&line.id) {
                return Err(DocumentError::at(
                    place,
                    format!("id {} appears twice", line.id),
                ));
            }
            if line.energies.len() != self.points.len() {
                let cause = format!(
                    "{} energies for {} points",
                    line.energies.len(),
                    self.points.len()
                );
                return Err(DocumentError::at(place, cause));
            }
        }
        for (number, point) in self.points.iter().enumerate() {
            for (rank, level) in point.levels.iter().enumerate() {
                if level.line.is_some_and(|id| !ids.contains(&id)) {
                    let place = format!("/points/{number}/levels/{rank}/line");
                    return Err(DocumentError::at(place, "no line has this id".to_owned()));
                }
            }
        }
        for (index, crossing) in self.crossings.iter().flatten().enumerate() {
            if crossing.lines.iter().any(|id| !ids.contains(id)) {
                let place = format!("/crossings/{index}/lines");
                return Err(DocumentError::at(place, "no line has this id".to_owned()));
            }
        }
        Ok(())
    }
}

impl ShapeDocument {
    /// Reads and checks a document of this form.
    pub fn from_json(text: &str) -> Result<Self, DocumentError> {
        let document: Self = parse(text)?;
        document.check()?;
        Ok(document)
    }

    /// Checks that supports lie between 0 and 1 and that curves are complete.
    pub fn check(&self) -> Result<(), DocumentError> {
        for (index, case) in self.cases.iter().enumerate() {
            if case
                .support
                .is_some_and(|support| !(0.0..=1.0).contains(&support.get()))
            {
                let place = format!("/cases/{index}/support");
                return Err(DocumentError::at(place, "not between 0 and 1".to_owned()));
            }
            if case
                .curves
                .iter()
                .any(|curve| curve.at.len() != curve.energy.len())
            {
                let place = format!("/cases/{index}/curves");
                let cause = "a curve needs one energy per value".to_owned();
                return Err(DocumentError::at(place, cause));
            }
        }
        Ok(())
    }
}

impl ParamsDocument {
    /// Reads a document of this form.
    pub fn from_json(text: &str) -> Result<Self, DocumentError> {
        parse(text)
    }
}

fn check_points(points: &[Point], coordinates: usize, atoms: usize) -> Result<(), DocumentError> {
    for (number, point) in points.iter().enumerate() {
        let place = format!("/points/{number}");
        if point.at.len() != coordinates {
            let cause = format!("{} values for {coordinates} coordinates", point.at.len());
            return Err(DocumentError::at(format!("{place}/at"), cause));
        }
        if point.positions.len() != atoms {
            let cause = format!("{} positions for {atoms} atoms", point.positions.len());
            return Err(DocumentError::at(format!("{place}/positions"), cause));
        }
        if !point.levels.is_sorted_by(|a, b| a.energy <= b.energy) {
            let cause = "not in order of energy".to_owned();
            return Err(DocumentError::at(format!("{place}/levels"), cause));
        }
    }
    Ok(())
}
