//! Names of shells: "3s", "4p", "3d".

use std::fmt;

/// A shell by its quantum numbers, n 1..=7 and l 0..=3 with l < n.
#[derive(Copy, Clone, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct ShellName {
    /// Principal quantum number.
    pub n: u8,
    /// Angular quantum number: 0 s, 1 p, 2 d, 3 f.
    pub l: u8,
}

impl ShellName {
    /// The letter of l.
    pub fn letter(l: u8) -> char {
        ['s', 'p', 'd', 'f']
            .get(usize::from(l))
            .copied()
            .unwrap_or('?')
    }

    /// Reads "3s"; the error says what is wrong with it.
    pub(crate) fn parse(text: &str) -> Result<Self, String> {
        let mut characters = text.chars();
        let n = characters
            .next()
            .and_then(|c| c.to_digit(10))
            .and_then(|d| u8::try_from(d).ok());
        let l = match characters.next() {
            Some('s') => Some(0),
            Some('p') => Some(1),
            Some('d') => Some(2),
            Some('f') => Some(3),
            _ => None,
        };
        match (n, l, characters.next()) {
            (Some(n), Some(l), None) if (1..=7).contains(&n) => {
                if l < n {
                    Ok(Self { n, l })
                } else {
                    Err(format!(
                        "there is no {text} shell: l must be smaller than n"
                    ))
                }
            }
            _ => Err(format!("`{text}` is not a shell")),
        }
    }
}

impl fmt::Display for ShellName {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}{}", self.n, Self::letter(self.l))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn legal_shells_and_no_others() {
        assert_eq!(ShellName::parse("3d"), Ok(ShellName { n: 3, l: 2 }));
        assert_eq!(ShellName { n: 4, l: 3 }.to_string(), "4f");
        for text in [
            "", "s", "3", "2d", "1p", "8s", "0s", "3g", "3S", "3s ", "33s",
        ] {
            assert!(ShellName::parse(text).is_err(), "{text}");
        }
    }
}
