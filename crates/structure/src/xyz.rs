//! Reading and writing XYZ and extended XYZ files.

mod comment;
mod error;
mod write;

pub use error::XyzError;
pub use write::write_xyz;

use crate::element::Element;
use crate::molecule::{Molecule, MoleculeError};
use crate::units::BOHR_IN_ANGSTROM;
use comment::Comment;

/// The unit of lengths in a file.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub enum LengthUnit {
    /// Å, the rule for XYZ files.
    #[default]
    Angstrom,
    /// bohr.
    Bohr,
}

/// How a file is read.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub struct XyzOptions {
    /// Unit of the coordinates (and of a displacement column).
    pub unit: LengthUnit,
}

/// One geometry of a file.
#[derive(Clone, Debug, PartialEq)]
pub struct Frame {
    /// The molecule; charge and unpaired electrons from the comment line.
    pub molecule: Molecule,
    /// A displacement vector per atom (Å), where `Properties=` names a column
    /// `displacement` (or `displacements`, `mode`) of three numbers.
    pub displacement: Option<Vec<[f64; 3]>>,
    /// The comment line as it was understood, in words.
    pub understood: String,
    /// What was left out or looks doubtful, one sentence each.
    pub notes: Vec<String>,
    /// Line of the file (from 1) that holds the number of atoms.
    pub line: usize,
}

/// Reads all geometries of an XYZ or extended XYZ text.
///
/// The comment line may hold `charge=`, `unpaired=` (or `multiplicity=`),
/// `title=` and `Properties=`, values in double quotes where they hold spaces.
/// Bare numbers (`0 1`) in it are not trusted as charge and spin.
///
/// # Errors
/// The first thing wrong, with line, column, cause and fix.
pub fn read_xyz(text: &str, options: &XyzOptions) -> Result<Vec<Frame>, XyzError> {
    let text = text.strip_prefix('\u{feff}').unwrap_or(text);
    let mut reader = Reader {
        lines: Lines::new(text),
        scale: match options.unit {
            LengthUnit::Angstrom => 1.0,
            LengthUnit::Bohr => BOHR_IN_ANGSTROM,
        },
    };
    let mut frames = Vec::new();
    while let Some(frame) = reader.frame(frames.last())? {
        frames.push(frame);
    }
    if frames.is_empty() {
        return Err(XyzError::new(
            1,
            1,
            "the file is empty",
            "an XYZ file holds the number of atoms, a comment line, and one line per atom",
        ));
    }
    Ok(frames)
}

/// As [`read_xyz`], for bytes that may not be text.
///
/// # Errors
/// As [`read_xyz`]; bytes that are not UTF-8 text.
pub fn read_xyz_bytes(bytes: &[u8], options: &XyzOptions) -> Result<Vec<Frame>, XyzError> {
    let place = |byte: usize| {
        let before = &bytes[..byte];
        let line = before.iter().filter(|&&b| b == b'\n').count() + 1;
        let start = before
            .iter()
            .rposition(|&b| b == b'\n')
            .map_or(0, |i| i + 1);
        (line, byte - start + 1)
    };
    if bytes.starts_with(&[0xff, 0xfe]) || bytes.starts_with(&[0xfe, 0xff]) {
        return Err(XyzError::new(
            1,
            1,
            "the file is UTF-16 text",
            "save it as UTF-8",
        ));
    }
    if let Some(byte) = bytes.iter().position(|&b| b == 0) {
        let (line, column) = place(byte);
        return Err(XyzError::new(
            line,
            column,
            "the file is binary, not text",
            "give an XYZ text file",
        ));
    }
    match std::str::from_utf8(bytes) {
        Ok(text) => read_xyz(text, options),
        Err(error) => {
            let (line, column) = place(error.valid_up_to());
            let fix = "save the file as UTF-8 text (is it an XYZ file at all?)";
            Err(XyzError::new(
                line,
                column,
                "there are bytes that are not UTF-8 text",
                fix,
            ))
        }
    }
}

/// Lines with their numbers from 1; `\n`, `\r\n` and a lone `\r` all end one.
struct Lines<'a> {
    rest: Option<&'a str>,
    number: usize,
}

impl<'a> Lines<'a> {
    fn new(text: &'a str) -> Self {
        Self {
            rest: (!text.is_empty()).then_some(text),
            number: 0,
        }
    }

    fn next(&mut self) -> Option<(usize, &'a str)> {
        let text = self.rest?;
        self.number += 1;
        let end = text
            .as_bytes()
            .iter()
            .position(|&b| b == b'\n' || b == b'\r');
        let Some(end) = end else {
            self.rest = None;
            return Some((self.number, text));
        };
        let skip = if text[end..].starts_with("\r\n") {
            2
        } else {
            1
        };
        let after = &text[end + skip..];
        self.rest = (!after.is_empty()).then_some(after);
        Some((self.number, &text[..end]))
    }
}

struct Reader<'a> {
    lines: Lines<'a>,
    scale: f64,
}

impl Reader<'_> {
    fn frame(&mut self, before: Option<&Frame>) -> Result<Option<Frame>, XyzError> {
        let (line, first) = loop {
            match self.lines.next() {
                None => return Ok(None),
                Some((_, text)) if text.trim().is_empty() => {}
                Some(found) => break found,
            }
        };
        let atoms = atom_count(line, first, before)?;
        let Some((comment_line, comment)) = self.lines.next() else {
            return Err(XyzError::new(
                line + 1,
                1,
                format!("the file ends after the number of atoms ({atoms})"),
                "add a comment line (it may be empty) and one line per atom",
            ));
        };
        let comment = Comment::read(comment_line, comment)?;
        let mut frame = Frame {
            molecule: Molecule {
                elements: Vec::new(),
                positions: Vec::new(),
                charge: comment.charge,
                unpaired: comment.unpaired,
                title: comment.title.clone(),
            },
            displacement: comment.columns.displacement.map(|_| Vec::new()),
            understood: comment.understood(),
            notes: comment.notes.clone(),
            line,
        };
        let mut ignored = 0;
        let mut numbered = false;
        for read in 0..atoms {
            let next = self
                .lines
                .next()
                .filter(|(_, text)| !text.trim().is_empty());
            let Some((number, text)) = next else {
                return Err(XyzError::new(
                    comment_line + read + 1,
                    1,
                    format!(
                        "line {line} announces {atoms} atoms, but only {read} atom lines follow"
                    ),
                    format!("add the missing atoms or write {read} on line {line}"),
                ));
            };
            let extra = self.atom(number, text, &comment, &mut frame, &mut numbered)?;
            ignored = ignored.max(extra);
        }
        if ignored > 0 {
            frame.notes.push(format!(
                "{ignored} columns beyond the known ones are ignored; name them in Properties= if they are a displacement"
            ));
        }
        if numbered {
            frame
                .notes
                .push("elements are given as atomic numbers".into());
        }
        frame.molecule.check().map_err(|error| {
            let atom = match error {
                MoleculeError::Close { second, .. } => second,
                MoleculeError::NotFinite { atom, .. } => atom,
                _ => 1,
            };
            let text = error.to_string();
            let (cause, fix) = text.split_once("; ").unwrap_or((&text, "correct it"));
            XyzError::new(comment_line + atom, 1, cause, fix)
        })?;
        Ok(Some(frame))
    }

    /// Reads one atom line into `frame`; returns the number of columns left over.
    fn atom(
        &self,
        line: usize,
        text: &str,
        comment: &Comment,
        frame: &mut Frame,
        numbered: &mut bool,
    ) -> Result<usize, XyzError> {
        let columns = &comment.columns;
        let mut position = [f64::NAN; 3];
        let mut vector = [f64::NAN; 3];
        let mut found = None;
        let mut count = 0;
        for (index, word) in text.split_whitespace().enumerate() {
            count = index + 1;
            let component = |start: usize| index.checked_sub(start).filter(|&k| k < 3);
            if index == columns.species {
                found = Some(element(line, text, word, numbered)?);
            } else if let Some(k) = component(columns.position) {
                position[k] = number(line, text, word)? * self.scale;
            } else if let Some(k) = columns.displacement.and_then(component) {
                vector[k] = number(line, text, word)? * self.scale;
            }
        }
        let (Some(found), true) = (found, count >= columns.needed()) else {
            return Err(XyzError::new(
                line,
                text.chars().count() + 1,
                format!(
                    "an atom line needs {} columns, this one has {count}",
                    columns.needed()
                ),
                if columns.total.is_some() {
                    "write the columns that Properties= names"
                } else {
                    "write the element and its x, y and z"
                },
            ));
        };
        frame.molecule.elements.push(found);
        frame.molecule.positions.push(position);
        if let Some(list) = &mut frame.displacement {
            list.push(vector);
        }
        Ok(count - columns.total.unwrap_or(columns.needed()).min(count))
    }
}

fn atom_count(line: usize, text: &str, before: Option<&Frame>) -> Result<usize, XyzError> {
    let words: Vec<&str> = text.split_whitespace().collect();
    let column = error::column_of(text, words[0]);
    if let [word] = words[..] {
        match word.parse::<usize>() {
            Ok(0) => {
                let fix = "write the number of atoms that follow, at least 1";
                return Err(XyzError::new(line, column, "the number of atoms is 0", fix));
            }
            Ok(count) => return Ok(count),
            Err(_) => {}
        }
    }
    let is_atom = words.len() >= 4 && Element::suggest(words[0]).is_some();
    Err(match before {
        Some(frame) if is_atom => XyzError::new(
            line,
            column,
            format!(
                "line {} announces {} atoms, but a further atom line follows",
                frame.line,
                frame.molecule.len()
            ),
            format!(
                "correct the number on line {} or remove this line",
                frame.line
            ),
        ),
        Some(_) => XyzError::new(
            line,
            column,
            format!("`{}` is not a number of atoms", error::shown(text.trim())),
            "after the last atom only a further geometry or blank lines may follow",
        ),
        None if is_atom => XyzError::new(
            line,
            column,
            "the file begins with an atom",
            "put the number of atoms on the first line and a comment (it may be empty) on the second",
        ),
        None => XyzError::new(
            line,
            column,
            format!("`{}` is not a number of atoms", error::shown(text.trim())),
            "the first line of an XYZ file holds the number of atoms alone",
        ),
    })
}

fn element(line: usize, text: &str, word: &str, numbered: &mut bool) -> Result<Element, XyzError> {
    if let Some(element) = Element::from_symbol(word) {
        return Ok(element);
    }
    let column = error::column_of(text, word);
    if let Ok(z) = word.parse::<u32>() {
        if let Some(element) = u8::try_from(z).ok().and_then(Element::from_number) {
            *numbered = true;
            return Ok(element);
        }
        let fix = "elements 1 (H) to 86 (Rn) are known";
        return Err(XyzError::new(
            line,
            column,
            format!("there is no element {z} here"),
            fix,
        ));
    }
    let letters: String = word.chars().take_while(|c| c.is_alphabetic()).collect();
    let fix = match Element::suggest(word).or_else(|| Element::suggest(&letters)) {
        Some(meant) => format!("write {meant} if {} is meant", meant.name()),
        None => "write an element symbol from H to Rn".to_string(),
    };
    let cause = format!("`{}` is not an element symbol", error::shown(word));
    Err(XyzError::new(line, column, cause, fix))
}

/// A finite number; everything else is refused with what it most likely is.
pub(crate) fn number(line: usize, text: &str, word: &str) -> Result<f64, XyzError> {
    let first = word.as_bytes()[0];
    // Words such as `inf` and `nan` parse as floats: only digits may begin one.
    let numeric = first.is_ascii_digit() || matches!(first, b'+' | b'-' | b'.');
    if numeric
        && let Ok(value) = word.parse::<f64>()
        && value.is_finite()
    {
        return Ok(value);
    }
    let lower = word.to_ascii_lowercase();
    let dash = |c: char| matches!(c, '\u{2212}' | '\u{2010}'..='\u{2015}');
    let bare = lower.trim_start_matches(['+', '-']);
    let (cause, fix) = if word.chars().any(dash) {
        ("has a Unicode minus sign or dash", "write the minus as `-`")
    } else if bare.starts_with("nan") || bare.starts_with("inf") || word.parse::<f64>().is_ok() {
        ("is not a finite number", "give a finite coordinate")
    } else if numeric && lower.contains('d') && lower.replace('d', "e").parse::<f64>().is_ok() {
        (
            "has an exponent written with D",
            "write it with E, as 1.0E-3",
        )
    } else if word.replace(',', ".").parse::<f64>().is_ok() {
        ("has a decimal comma", "write it with a point")
    } else {
        ("is not a number", "write a decimal number such as -0.757")
    };
    let column = error::column_of(text, word);
    Err(XyzError::new(
        line,
        column,
        format!("`{}` {cause}", error::shown(word)),
        fix,
    ))
}

#[cfg(test)]
mod tests;
