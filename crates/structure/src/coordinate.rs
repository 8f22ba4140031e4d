//! Internal coordinates as a user names them, and their measured values.

use crate::range::{Range, RangeError};
use thiserror::Error;

/// The kinds of internal coordinate.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum CoordinateKind {
    /// Angle at the middle one of three atoms, degrees.
    Bend,
    /// Distance of two atoms, Å.
    Stretch,
    /// Torsion of four atoms, degrees, positive clockwise along the middle bond.
    Twist,
    /// Common ligand–centre–ligand angle at a three-coordinate atom, degrees.
    Pyramid,
}

impl CoordinateKind {
    /// The word for the kind (`"bend"`).
    pub fn name(self) -> &'static str {
        match self {
            Self::Bend => "bend",
            Self::Stretch => "stretch",
            Self::Twist => "twist",
            Self::Pyramid => "pyramid",
        }
    }

    /// The unit of its values (`"degree"` or `"angstrom"`).
    pub fn unit(self) -> &'static str {
        match self {
            Self::Stretch => "angstrom",
            Self::Bend | Self::Twist | Self::Pyramid => "degree",
        }
    }

    /// Number of atoms that define it.
    pub fn atom_count(self) -> usize {
        match self {
            Self::Pyramid => 1,
            Self::Stretch => 2,
            Self::Bend => 3,
            Self::Twist => 4,
        }
    }

    /// Smallest and largest value; the smallest is excluded for bend and pyramid.
    fn limits(self) -> (f64, f64) {
        match self {
            Self::Bend => (0.0, 180.0),
            Self::Stretch => (crate::molecule::SMALLEST_DISTANCE, 1000.0),
            Self::Twist => (-360.0, 360.0),
            Self::Pyramid => (0.0, 120.0),
        }
    }

    fn form(self) -> &'static str {
        match self {
            Self::Bend => "2-1-3=90..180:2",
            Self::Stretch => "1-2=0.8..1.6:0.05",
            Self::Twist => "3-1-2-4=0..180:5",
            Self::Pyramid => "1=90..120:1",
        }
    }
}

impl std::fmt::Display for CoordinateKind {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.pad(self.name())
    }
}

/// One coordinate and the values it runs through.
#[derive(Clone, Debug, PartialEq)]
pub struct Coordinate {
    /// Its kind.
    pub kind: CoordinateKind,
    /// The atoms that define it, counted from 0.
    pub atoms: Vec<usize>,
    /// Its values: degrees, or Å for a stretch.
    pub range: Range,
    /// Whether equivalent partners stay where they are.
    pub alone: bool,
}

/// A coordinate that cannot be meant, with place, cause and fix.
#[derive(Clone, Debug, PartialEq, Error)]
#[error("{kind} `{argument}`, character {column}: {cause}; {fix}")]
pub struct CoordinateError {
    /// The kind of coordinate.
    pub kind: CoordinateKind,
    /// The text as written.
    pub argument: String,
    /// Place in it, counted from 1.
    pub column: usize,
    /// What is wrong.
    pub cause: String,
    /// What to do.
    pub fix: String,
}

impl Coordinate {
    /// A coordinate from its parts, with the checks that need no molecule.
    ///
    /// # Errors
    /// Wrong number of atoms, an atom named twice, a value outside the range
    /// that the kind allows, a range without values.
    pub fn new(
        kind: CoordinateKind,
        atoms: Vec<usize>,
        range: Range,
        alone: bool,
    ) -> Result<Self, CoordinateError> {
        let coordinate = Self {
            kind,
            atoms,
            range,
            alone,
        };
        let argument = coordinate.text();
        let error = |column, cause: String, fix: String| CoordinateError {
            kind,
            argument: argument.clone(),
            column,
            cause,
            fix,
        };
        check_atoms(kind, &coordinate.atoms).map_err(|(cause, fix)| error(1, cause, fix))?;
        check_range(kind, &range).map_err(|(cause, fix)| error(1, cause, fix))?;
        Ok(coordinate)
    }

    /// Reads `"2-1-3=90..180:2"`: atoms counted from 1, from..to:step.
    ///
    /// # Errors
    /// A text of another form, with the place, the cause and the fix; and all
    /// that [`Coordinate::new`] refuses.
    pub fn parse(kind: CoordinateKind, text: &str) -> Result<Self, CoordinateError> {
        Self::read(kind, text, None)
    }

    /// Reads `"1-2=1.60..1.55"` without a step, for a coordinate that moves in
    /// step with another one of `points` points.
    ///
    /// # Errors
    /// As [`Coordinate::parse`]; a step in the text must give the same number of points.
    pub fn parse_with_points(
        kind: CoordinateKind,
        text: &str,
        points: usize,
    ) -> Result<Self, CoordinateError> {
        Self::read(kind, text, Some(points))
    }

    fn read(
        kind: CoordinateKind,
        text: &str,
        points: Option<usize>,
    ) -> Result<Self, CoordinateError> {
        let reader = Reader { kind, text };
        if let Some((place, found)) = text.char_indices().find(|(_, c)| !c.is_ascii()) {
            let name = match found {
                '\u{2212}' => "a Unicode minus sign",
                '\u{2010}'..='\u{2015}' => "a dash",
                '\u{2026}' => "an ellipsis",
                _ => "not an ASCII character",
            };
            let fix = format!("write it with `-` and `..`, for example {}", kind.form());
            return Err(reader.error(place, format!("`{found}` is {name}"), fix));
        }
        let form = || format!("write it like {}", kind.form());
        let Some(equals) = text.find('=') else {
            return Err(reader.error(text.len(), "there is no `=`".into(), form()));
        };
        let mut atoms = Vec::new();
        let mut place = 0;
        for word in text[..equals].split('-') {
            atoms.push(reader.atom(word, place)?);
            place += word.len() + 1;
        }
        let check = check_atoms(kind, &atoms);
        check.map_err(|(cause, fix)| reader.error(0, cause, fix))?;
        let range = reader.range(equals + 1, points)?;
        let check = check_range(kind, &range);
        check.map_err(|(cause, fix)| reader.error(equals + 1, cause, fix))?;
        Ok(Self {
            kind,
            atoms,
            range,
            alone: false,
        })
    }

    /// The coordinate with `alone` set: partners stay where they are.
    #[must_use]
    pub fn alone(mut self) -> Self {
        self.alone = true;
        self
    }

    /// `"bend 2-1-3"`, atoms counted from 1.
    pub fn name(&self) -> String {
        format!("{} {}", self.kind, atoms_text(&self.atoms))
    }

    /// `"2-1-3=90..180:2"`, as [`Coordinate::parse`] reads it.
    pub fn text(&self) -> String {
        format!("{}={}", atoms_text(&self.atoms), self.range)
    }
}

/// `"2-1-3"` from atoms counted from 0.
pub(crate) fn atoms_text(atoms: &[usize]) -> String {
    let words: Vec<String> = atoms.iter().map(|atom| (atom + 1).to_string()).collect();
    words.join("-")
}

type Refusal = (String, String);

pub(crate) fn check_atoms(kind: CoordinateKind, atoms: &[usize]) -> Result<(), Refusal> {
    if atoms.len() != kind.atom_count() {
        return Err((
            format!(
                "a {kind} needs {} atoms, not {}",
                kind.atom_count(),
                atoms.len()
            ),
            format!("write it like {}", kind.form()),
        ));
    }
    for (place, atom) in atoms.iter().enumerate() {
        if atoms[..place].contains(atom) {
            return Err((
                format!("atom {} is named twice", atom + 1),
                "name different atoms".into(),
            ));
        }
    }
    Ok(())
}

pub(crate) fn check_value(kind: CoordinateKind, value: f64) -> Result<(), Refusal> {
    let (low, high) = kind.limits();
    let open = matches!(kind, CoordinateKind::Bend | CoordinateKind::Pyramid);
    if (open && value <= low) || value < low || value > high || value.is_nan() {
        let reason = match kind {
            CoordinateKind::Bend => "an angle lies above 0 and up to 180 degrees",
            CoordinateKind::Stretch => "a distance lies between 0.2 and 1000 Å",
            CoordinateKind::Twist => "a torsion lies between -360 and 360 degrees",
            CoordinateKind::Pyramid => {
                "three equal angles lie above 0 and up to 120 degrees, where the atom is planar"
            }
        };
        return Err((format!("the value {value} is impossible"), reason.into()));
    }
    Ok(())
}

fn check_range(kind: CoordinateKind, range: &Range) -> Result<(), Refusal> {
    range.check().map_err(|error| split_message(&error))?;
    check_value(kind, range.from)?;
    check_value(kind, range.to)
}

/// Range errors say `cause; fix` in one sentence.
fn split_message(error: &RangeError) -> Refusal {
    let text = error.to_string();
    match text.split_once("; ").or_else(|| text.split_once(", so ")) {
        Some((cause, fix)) => (cause.to_string(), fix.to_string()),
        None => (text, "give another range".into()),
    }
}

struct Reader<'a> {
    kind: CoordinateKind,
    text: &'a str,
}

impl Reader<'_> {
    fn error(&self, byte: usize, cause: String, fix: String) -> CoordinateError {
        CoordinateError {
            kind: self.kind,
            argument: self.text.to_string(),
            column: self.text[..byte].chars().count() + 1,
            cause,
            fix,
        }
    }

    fn atom(&self, word: &str, place: usize) -> Result<usize, CoordinateError> {
        match word.trim().parse::<usize>() {
            Ok(0) => Err(self.error(
                place,
                "there is no atom 0".into(),
                "atoms are counted from 1, in the order of the file".into(),
            )),
            Ok(number) if !word.trim().starts_with('+') => Ok(number - 1),
            _ => Err(self.error(
                place,
                format!("`{word}` is not an atom number"),
                format!(
                    "write atoms as numbers with `-` between, like {}",
                    self.kind.form()
                ),
            )),
        }
    }

    fn number(&self, word: &str, place: usize) -> Result<f64, CoordinateError> {
        let value = word.trim().parse::<f64>().ok().filter(|x| x.is_finite());
        value.ok_or_else(|| {
            let cause = if word.trim().is_empty() {
                "a number is missing".to_string()
            } else {
                format!("`{word}` is not a finite number")
            };
            self.error(
                place,
                cause,
                format!("write from..to:step, like {}", self.kind.form()),
            )
        })
    }

    fn range(&self, start: usize, points: Option<usize>) -> Result<Range, CoordinateError> {
        let form = || format!("write from..to:step, like {}", self.kind.form());
        let text = &self.text[start..];
        let Some(dots) = text.find("..") else {
            return Err(self.error(start, format!("`{text}` is no range"), form()));
        };
        if text[dots + 2..].starts_with('.') {
            return Err(self.error(start + dots, "three dots are ambiguous".into(), form()));
        }
        let from = self.number(&text[..dots], start)?;
        let rest = &text[dots + 2..];
        let colon = rest.find(':');
        let to = self.number(&rest[..colon.unwrap_or(rest.len())], start + dots + 2)?;
        let refused = |error: RangeError| {
            let (cause, fix) = split_message(&error);
            self.error(start, cause, fix)
        };
        let range = match (colon, points) {
            (Some(colon), _) => {
                let step = self.number(&rest[colon + 1..], start + dots + colon + 3)?;
                Range::new(from, to, step).map_err(refused)?
            }
            (None, Some(points)) => Range::with_points(from, to, points).map_err(refused)?,
            (None, None) => {
                return Err(self.error(self.text.len(), "the step is missing".into(), form()));
            }
        };
        match points {
            Some(points) if range.points() != points => Err(self.error(
                start,
                format!(
                    "it has {} points, but moves in step with {points}",
                    range.points()
                ),
                "leave the step out".into(),
            )),
            _ => Ok(range),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn refused(kind: CoordinateKind, text: &str) -> (usize, String) {
        let error = Coordinate::parse(kind, text).unwrap_err();
        (error.column, error.to_string())
    }

    #[test]
    fn forms_of_the_contract() {
        use CoordinateKind::{Bend, Pyramid, Stretch, Twist};
        for kind in [Bend, Stretch, Twist, Pyramid] {
            let coordinate = Coordinate::parse(kind, kind.form()).unwrap();
            assert_eq!(coordinate.text(), kind.form());
        }
        let bend = Coordinate::parse(Bend, "2-1-3=90..180:2").unwrap();
        assert_eq!(bend.atoms, [1, 0, 2]);
        assert_eq!(bend.range.points(), 46);
        assert_eq!(bend.name(), "bend 2-1-3");
        let twist = Coordinate::parse(Twist, "3-1-2-4=-180..180:5").unwrap();
        assert!((twist.range.from + 180.0).abs() < 1e-300);
        let with = Coordinate::parse_with_points(Stretch, "1-2=1.60..1.55", 6).unwrap();
        assert_eq!(with.range.points(), 6);
        assert!(Coordinate::parse_with_points(Stretch, "1-2=1.6..1.5:0.05", 6).is_err());
    }

    #[test]
    fn refusals_name_place_cause_and_fix() {
        use CoordinateKind::{Bend, Pyramid, Stretch, Twist};
        let (column, text) = refused(Bend, "0-1-3=90..180:2");
        assert_eq!(column, 1);
        assert!(
            text.contains("no atom 0") && text.contains("counted from 1"),
            "{text}"
        );
        assert!(
            refused(Bend, "2-1-2=90..180:2")
                .1
                .contains("atom 2 is named twice")
        );
        assert!(
            refused(Bend, "1-1-2=90..180:2")
                .1
                .contains("atom 1 is named twice")
        );
        assert!(
            refused(Bend, "2-1=90..180:2")
                .1
                .contains("needs 3 atoms, not 2")
        );
        assert!(refused(Bend, "2-1-3 90..180:2").1.contains("no `=`"));
        assert!(refused(Bend, "2-1-3=90..180").1.contains("step is missing"));
        assert!(refused(Bend, "2-1-3=90..180:0").1.contains("the step is 0"));
        assert!(
            refused(Bend, "2-1-3=90..180:-2")
                .1
                .contains("positive step")
        );
        assert!(refused(Bend, "2-1-3=90..180:7").1.contains("never 180"));
        assert!(
            refused(Bend, "2-1-3=90..190:2")
                .1
                .contains("190 is impossible")
        );
        assert!(
            refused(Bend, "2-1-3=0..180:2")
                .1
                .contains("0 is impossible")
        );
        assert!(refused(Bend, "2-1-3=90..90:2").1.contains("empty"));
        assert!(
            refused(Bend, "2-1-3=nan..90:2")
                .1
                .contains("not a finite number")
        );
        assert!(
            refused(Bend, "2-1-3=..90:2")
                .1
                .contains("a number is missing")
        );
        assert!(refused(Bend, "2-1-3=90...100:2").1.contains("three dots"));
        assert!(refused(Pyramid, "1=90..121:1").1.contains("planar"));
        assert!(
            refused(Stretch, "1-2=0.1..2:0.1")
                .1
                .contains("0.1 is impossible")
        );
        assert!(
            refused(Stretch, "a-2=1..2:0.1")
                .1
                .contains("`a` is not an atom number")
        );
        let (column, text) = refused(Twist, "3-1-2-4=\u{2212}180..180:5");
        assert_eq!(column, 9);
        assert!(text.contains("Unicode minus"), "{text}");
        assert!(refused(Twist, "3-1-2-4=0..1e-9:1e-20").1.contains("empty"));
        assert!(
            refused(Twist, "3-1-2-4=0..180:1e-9")
                .1
                .contains("10 million")
        );
    }
}
