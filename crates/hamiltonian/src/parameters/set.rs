//! Parameter sets: the built-in ones, overlays, choices.

use std::collections::BTreeMap;
use std::sync::{Arc, OnceLock};

use orbend_structure::Element;

use super::element::ElementParameters;
use super::element_reader::ElementEntry;
use super::fingerprint;
use super::problem::{FileProblems, ParameterError};
use super::reader::{self, ParameterFile};
use super::shell_name::ShellName;

/// The names of the built-in sets, the default first.
pub const SET_NAMES: [&str; 2] = ["hoffmann", "hoffmann-1963"];
/// The set that is used where none is named.
pub const DEFAULT_SET: &str = SET_NAMES[0];

const FILES: [(&str, &str); 2] = [
    (
        "params/hoffmann.toml",
        include_str!("../../../../params/hoffmann.toml"),
    ),
    (
        "params/hoffmann-1963.toml",
        include_str!("../../../../params/hoffmann-1963.toml"),
    ),
];

/// Values for a number of elements. A clone shares them.
#[derive(Clone, Debug, PartialEq)]
pub struct ParameterSet {
    name: String,
    title: String,
    elements: BTreeMap<Element, Arc<ElementParameters>>,
}

impl Default for ParameterSet {
    /// The built-in set [`DEFAULT_SET`].
    fn default() -> Self {
        // A test keeps the built-in files free of problems, so the empty set never shows.
        Self::builtin(DEFAULT_SET).unwrap_or(Self {
            name: DEFAULT_SET.to_owned(),
            title: String::new(),
            elements: BTreeMap::new(),
        })
    }
}

impl ParameterSet {
    /// A built-in set by name; its file is read once per process.
    ///
    /// # Errors
    /// [`ParameterError::UnknownSet`] with the names that exist.
    pub fn builtin(name: &str) -> Result<Self, ParameterError> {
        static READ: [OnceLock<Result<ParameterSet, FileProblems>>; 2] =
            [const { OnceLock::new() }; 2];
        let Some(index) = SET_NAMES.iter().position(|known| *known == name) else {
            return Err(ParameterError::UnknownSet {
                name: name.to_owned(),
            });
        };
        let (file, text) = FILES[index];
        READ[index]
            .get_or_init(|| Self::from_file(text, file))
            .clone()
            .map_err(ParameterError::InFile)
    }

    /// Reads a whole set from TOML text; `file` names it in messages.
    ///
    /// # Errors
    /// [`ParameterError::InFile`] with every problem of the file.
    pub fn from_toml(text: &str, file: &str) -> Result<Self, ParameterError> {
        Self::from_file(text, file).map_err(ParameterError::InFile)
    }

    fn from_file(text: &str, file: &str) -> Result<Self, FileProblems> {
        let read = reader::read(text, file)?;
        let (name, title) = (read.name.clone(), read.title.clone());
        Self {
            name,
            title,
            elements: BTreeMap::new(),
        }
        .merged(read, text, file)
    }

    /// This set with the elements of a TOML text laid over it, element by element: an element of
    /// the file replaces that of the set whole. A table with nothing but `default = "B"` chooses a
    /// variant of the set. The new set has the name "set+file's name" and its own fingerprint.
    ///
    /// # Errors
    /// [`ParameterError::InFile`] with every problem of the file.
    pub fn overlay(&self, text: &str, file: &str) -> Result<Self, ParameterError> {
        let read = reader::read(text, file).map_err(ParameterError::InFile)?;
        let name = format!("{}+{}", self.name, read.name);
        let merged = self
            .merged(read, text, file)
            .map_err(ParameterError::InFile)?;
        Ok(Self { name, ..merged })
    }

    fn merged(&self, read: ParameterFile, text: &str, file: &str) -> Result<Self, FileProblems> {
        let mut out = self.clone();
        let mut problems = Vec::new();
        for (element, _, entry) in read.elements {
            match entry {
                ElementEntry::Values(variants, chosen) => {
                    let parameters = ElementParameters {
                        element,
                        variants,
                        chosen,
                        optional_in_use: Vec::new(),
                        origin: read.name.clone(),
                    };
                    out.elements.insert(element, Arc::new(parameters));
                }
                ElementEntry::Choice(variant, span) => {
                    if let Err((cause, fix)) = out.choose_variant(element, &variant) {
                        problems.push((span, cause, fix));
                    }
                }
            }
        }
        if problems.is_empty() {
            Ok(out)
        } else {
            Err(FileProblems::new(file, text, problems))
        }
    }

    /// This set with choices made: `S:B` takes variant B of sulfur, `S+3d` adds its optional 3d
    /// shell, `S:B+3d` both.
    ///
    /// # Errors
    /// [`ParameterError::Choice`] for an element, variant or shell that the set does not have.
    pub fn choose<T: AsRef<str>>(&self, choices: &[T]) -> Result<Self, ParameterError> {
        let mut out = self.clone();
        for choice in choices {
            let choice = choice.as_ref();
            out.choose_one(choice)
                .map_err(|(cause, fix)| ParameterError::Choice {
                    choice: choice.to_owned(),
                    cause,
                    fix,
                })?;
        }
        Ok(out)
    }

    fn choose_one(&mut self, choice: &str) -> Result<(), (String, String)> {
        let (head, shells) = match choice.split_once('+') {
            Some((head, shells)) => (head, Some(shells)),
            None => (choice, None),
        };
        let (symbol, variant) = match head.split_once(':') {
            Some((symbol, variant)) => (symbol, Some(variant)),
            None => (head, None),
        };
        let Some(element) = Element::from_symbol(symbol) else {
            let fix = Element::suggest(symbol).map_or_else(
                || "write for example S:B".to_owned(),
                |e| format!("did you mean {}?", e.symbol()),
            );
            return Err((format!("`{symbol}` is no element"), fix));
        };
        if variant.is_none() && shells.is_none() {
            return Err((
                "nothing is chosen".to_owned(),
                format!("write {symbol}:VARIANT or {symbol}+SHELL"),
            ));
        }
        if let Some(variant) = variant {
            self.choose_variant(element, variant)?;
        }
        for shell in shells.into_iter().flat_map(|list| list.split('+')) {
            self.use_optional(element, shell)?;
        }
        Ok(())
    }

    fn known(&mut self, element: Element) -> Result<&mut ElementParameters, (String, String)> {
        let name = &self.name;
        self.elements
            .get_mut(&element)
            .map(Arc::make_mut)
            .ok_or_else(|| {
                (
                    format!("the set {name} has no {}", element.symbol()),
                    "give its shells in a file that overlays the set".to_owned(),
                )
            })
    }

    fn choose_variant(&mut self, element: Element, variant: &str) -> Result<(), (String, String)> {
        let known = self.known(element)?;
        match known
            .variants
            .iter()
            .position(|other| other.name == variant)
        {
            Some(index) => {
                known.chosen = index;
                Ok(())
            }
            None => {
                let names: Vec<&str> = known
                    .variants
                    .iter()
                    .map(|other| other.name.as_str())
                    .collect();
                Err((
                    format!("{} has no variant `{variant}`", element.symbol()),
                    format!("choose from {}", names.join(", ")),
                ))
            }
        }
    }

    fn use_optional(&mut self, element: Element, shell: &str) -> Result<(), (String, String)> {
        let known = self.known(element)?;
        let offered: Vec<ShellName> = known
            .variant()
            .shells
            .iter()
            .filter(|s| s.optional)
            .map(|s| s.name())
            .collect();
        match offered.iter().find(|name| name.to_string() == shell) {
            Some(&name) => {
                if !known.optional_in_use.contains(&name) {
                    known.optional_in_use.push(name);
                }
                Ok(())
            }
            None => {
                let names: Vec<String> = offered.iter().map(ToString::to_string).collect();
                let fix = if names.is_empty() {
                    "give the shell in a file that overlays the set".to_owned()
                } else {
                    format!("offered: {}", names.join(", "))
                };
                Err((
                    format!("{} has no optional shell `{shell}`", element.symbol()),
                    fix,
                ))
            }
        }
    }

    /// "hoffmann", or "hoffmann+mine" for an overlay.
    pub fn name(&self) -> &str {
        &self.name
    }

    /// One line on what the set is.
    pub fn title(&self) -> &str {
        &self.title
    }

    /// The values of an element, if the set has it.
    pub fn element(&self, element: Element) -> Option<&ElementParameters> {
        self.elements.get(&element).map(Arc::as_ref)
    }

    /// All elements of the set by atomic number.
    pub fn elements(&self) -> impl Iterator<Item = &ElementParameters> {
        self.elements.values().map(Arc::as_ref)
    }

    /// `sha256:…` over the values in use (chosen variants, optional shells only where in use), as
    /// one canonical text line per shell: symbol, shell, Hᵢᵢ/eV, exponent:coefficient as published.
    pub fn fingerprint(&self) -> String {
        fingerprint::fingerprint(&fingerprint::canonical_text(self.elements()))
    }

    /// This set with the chosen values of one shell changed by `change`, for tests of how far a
    /// result rests on a value. `terms` may be changed freely: they are normalised again.
    /// Returns `None` if the shell is not there.
    pub fn with_changed_shell(
        &self,
        element: Element,
        shell: ShellName,
        change: impl FnOnce(&mut super::ShellParameters),
    ) -> Option<Self> {
        let mut out = self.clone();
        let known = out.elements.get_mut(&element).map(Arc::make_mut)?;
        let chosen = known.chosen;
        let values = known.variants[chosen]
            .shells
            .iter_mut()
            .find(|other| other.name() == shell)?;
        change(values);
        let scale = crate::contraction::contraction_norm(values.n, &values.terms).sqrt();
        for term in &mut values.terms {
            term.1 /= scale;
        }
        values.published.clone_from(&values.terms);
        Some(out)
    }
}
