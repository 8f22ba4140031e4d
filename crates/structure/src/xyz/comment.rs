//! The comment line: `key=value` pairs of extended XYZ among free words.

use super::error::{XyzError, column_of, shown};

/// Where the columns of an atom line stand.
#[derive(Clone, Debug)]
pub(crate) struct Columns {
    pub(crate) species: usize,
    pub(crate) position: usize,
    pub(crate) displacement: Option<usize>,
    /// All columns that `Properties=` names.
    pub(crate) total: Option<usize>,
}

impl Columns {
    /// Columns that an atom line must have.
    pub(crate) fn needed(&self) -> usize {
        let last = |start: usize| start + 3;
        let displaced = self.displacement.map_or(0, last);
        last(self.position).max(displaced).max(self.species + 1)
    }
}

#[derive(Clone, Debug)]
pub(crate) struct Comment {
    pub(crate) charge: i32,
    pub(crate) unpaired: Option<u32>,
    pub(crate) title: String,
    pub(crate) columns: Columns,
    pub(crate) notes: Vec<String>,
    charge_given: bool,
}

impl Comment {
    pub(crate) fn read(line: usize, text: &str) -> Result<Self, XyzError> {
        let mut comment = Self {
            charge: 0,
            unpaired: None,
            title: String::new(),
            columns: Columns {
                species: 0,
                position: 1,
                displacement: None,
                total: None,
            },
            notes: Vec::new(),
            charge_given: false,
        };
        let mut words: Vec<&str> = Vec::new();
        let mut seen: Vec<String> = Vec::new();
        let mut ignored: Vec<&str> = Vec::new();
        let mut rest = text;
        while let Some(token) = next_token(line, text, &mut rest)? {
            let Token { key, value, whole } = token;
            let Some(key) = key else {
                words.push(whole);
                continue;
            };
            let name = key.to_ascii_lowercase();
            if seen.contains(&name) {
                let cause = format!("`{key}=` is given twice");
                return Err(XyzError::new(
                    line,
                    column_of(text, whole),
                    cause,
                    "give it once",
                ));
            }
            match name.as_str() {
                "charge" => {
                    comment.charge = integer(line, text, key, value)?;
                    comment.charge_given = true;
                }
                "unpaired" => comment.unpaired = Some(count(line, text, key, value, 0)?),
                "multiplicity" => {
                    let found = count(line, text, key, value, 1)? - 1;
                    if comment.unpaired.is_some_and(|known| known != found) {
                        let cause = "`unpaired=` and `multiplicity=` contradict one another";
                        let fix = "the multiplicity is the number of unpaired electrons plus 1";
                        return Err(XyzError::new(line, column_of(text, whole), cause, fix));
                    }
                    comment.unpaired = Some(found);
                }
                "title" => comment.title = value.to_string(),
                "properties" => comment.columns = columns(line, text, value)?,
                "lattice" | "pbc" => comment.notes.push(format!(
                    "`{key}=` is ignored: the atoms are taken as one molecule without periodic images"
                )),
                _ => ignored.push(key),
            }
            seen.push(name);
        }
        if !ignored.is_empty() {
            comment.notes.push(format!(
                "ignored in the comment line: {}",
                ignored.join(", ")
            ));
        }
        let bare = words.len() == 2 && words.iter().all(|word| word.parse::<i32>().is_ok());
        if bare && !comment.charge_given {
            comment.notes.push(format!(
                "`{} {}` is not read as charge and spin; write charge=… unpaired=… to state them",
                words[0], words[1]
            ));
        }
        if comment.title.is_empty() {
            comment.title = words.join(" ");
        }
        Ok(comment)
    }

    /// The comment line in words.
    pub(crate) fn understood(&self) -> String {
        let charge = if self.charge_given {
            format!("charge {:+}", self.charge).replace("+0", "0")
        } else {
            "no charge given (0 is taken)".into()
        };
        let unpaired = match self.unpaired {
            Some(1) => "1 unpaired electron".to_string(),
            Some(n) => format!("{n} unpaired electrons"),
            None => "unpaired electrons not given".into(),
        };
        let mut text = format!("{charge}, {unpaired}");
        if self.columns.displacement.is_some() {
            text.push_str(", a displacement per atom");
        }
        if !self.title.is_empty() {
            text.push_str(&format!(", title \"{}\"", self.title));
        }
        text
    }
}

struct Token<'a> {
    key: Option<&'a str>,
    value: &'a str,
    whole: &'a str,
}

/// The next word or `key=value`; quotes and braces count only behind the `=`.
fn next_token<'a>(
    line: usize,
    text: &'a str,
    rest: &mut &'a str,
) -> Result<Option<Token<'a>>, XyzError> {
    let start = rest.trim_start();
    if start.is_empty() {
        return Ok(None);
    }
    let word_end = start.find(char::is_whitespace).unwrap_or(start.len());
    let is_key = |key: &str| {
        key.starts_with(|c: char| c.is_ascii_alphabetic())
            && key
                .chars()
                .all(|c| c.is_ascii_alphanumeric() || matches!(c, '_' | '-' | '.'))
    };
    let equals = start[..word_end]
        .find('=')
        .filter(|&at| is_key(&start[..at]));
    let Some(equals) = equals else {
        *rest = &start[word_end..];
        return Ok(Some(Token {
            key: None,
            value: "",
            whole: &start[..word_end],
        }));
    };
    let behind = &start[equals + 1..];
    let closing = match behind.chars().next() {
        Some(quote @ ('"' | '\'')) => Some(quote),
        Some('{') => Some('}'),
        _ => None,
    };
    let (value, end) = match closing {
        None => (&start[equals + 1..word_end], word_end),
        Some(closing) => {
            let Some(length) = behind[1..].find(closing) else {
                return Err(XyzError::new(
                    line,
                    column_of(text, behind),
                    format!("the quoted value of `{}=` does not end", &start[..equals]),
                    format!("close it with {closing}"),
                ));
            };
            (&behind[1..1 + length], equals + 1 + length + 2)
        }
    };
    *rest = &start[end..];
    Ok(Some(Token {
        key: Some(&start[..equals]),
        value,
        whole: &start[..end],
    }))
}

fn integer(line: usize, text: &str, key: &str, value: &str) -> Result<i32, XyzError> {
    value.trim().parse::<i32>().map_err(|_| {
        let fix = if value.contains('\u{2212}') {
            "write the minus as `-`"
        } else {
            "write a whole number such as -1"
        };
        let cause = format!("`{}` is no value for `{key}=`", shown(value));
        XyzError::new(line, column_of(text, value), cause, fix)
    })
}

fn count(line: usize, text: &str, key: &str, value: &str, least: u32) -> Result<u32, XyzError> {
    let found = value.trim().parse::<u32>().ok().filter(|&n| n >= least);
    found.ok_or_else(|| {
        let cause = format!("`{}` is no value for `{key}=`", shown(value));
        let fix = format!("write a whole number from {least} up");
        XyzError::new(line, column_of(text, value), cause, fix)
    })
}

/// `Properties=species:S:1:pos:R:3:displacement:R:3`.
fn columns(line: usize, text: &str, value: &str) -> Result<Columns, XyzError> {
    let form = "write it like Properties=species:S:1:pos:R:3";
    let refused = |cause: String| XyzError::new(line, column_of(text, value), cause, form);
    let parts: Vec<&str> = value.split(':').collect();
    if !parts.len().is_multiple_of(3) {
        return Err(refused(
            "`Properties=` is not a list of name:type:columns".into(),
        ));
    }
    let (mut species, mut position, mut displacement) = (None, None, None);
    let mut start: usize = 0;
    for part in parts.chunks_exact(3) {
        let width = part[2]
            .parse::<usize>()
            .ok()
            .filter(|n| (1..=100).contains(n));
        let Some(width) = width else {
            return Err(refused(format!(
                "`{}` is not a number of columns",
                shown(part[2])
            )));
        };
        match part[0].to_ascii_lowercase().as_str() {
            "species" | "element" if width == 1 => species = Some(start),
            "pos" | "position" | "positions" if width == 3 => position = Some(start),
            "displacement" | "displacements" | "mode" if width == 3 => displacement = Some(start),
            "species" | "pos" | "displacement" => {
                return Err(refused(format!(
                    "`{}` cannot have {width} columns",
                    part[0]
                )));
            }
            _ => {}
        }
        start += width;
    }
    let missing = |name: &str| refused(format!("`Properties=` does not name `{name}`"));
    Ok(Columns {
        species: species.ok_or_else(|| missing("species"))?,
        position: position.ok_or_else(|| missing("pos"))?,
        displacement,
        total: Some(start),
    })
}
