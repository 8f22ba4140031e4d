//! Labels as a chemist writes them: numbers, Greek letters, subscripts and superscripts.

/// Height of a piece of text against the base line.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Shift {
    /// On the base line.
    None,
    /// Subscript.
    Sub,
    /// Superscript.
    Super,
}

/// A piece of text at one height.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct Run {
    pub(crate) text: String,
    pub(crate) shift: Shift,
}

impl Run {
    /// Whether this is a prime, whose glyph is raised already.
    pub(crate) fn is_prime(&self) -> bool {
        self.text.starts_with(['′', '″'])
    }

    /// Size relative to the text.
    pub(crate) fn scale(&self) -> f64 {
        if self.shift == Shift::None || self.is_prime() {
            1.0
        } else {
            SMALL
        }
    }
}

/// A whole label.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub(crate) struct Lettering {
    pub(crate) runs: Vec<Run>,
}

/// Size of subscripts and superscripts relative to the text.
pub(crate) const SMALL: f64 = 0.72;

impl Lettering {
    /// Text without any shift.
    pub(crate) fn plain(text: impl Into<String>) -> Self {
        let mut lettering = Self::default();
        lettering.push(text, Shift::None);
        lettering
    }

    /// Words with superscripts written `^{…}`.
    pub(crate) fn words(text: &str) -> Self {
        let mut lettering = Self::default();
        let mut rest = text;
        while let Some((before, raised)) = rest.split_once("^{") {
            lettering.push(before, Shift::None);
            let (above, after) = raised.split_once('}').unwrap_or((raised, ""));
            lettering.push(above, Shift::Super);
            rest = after;
        }
        lettering.push(rest, Shift::None);
        lettering
    }

    fn push(&mut self, text: impl Into<String>, shift: Shift) {
        let text = text.into();
        if !text.is_empty() {
            self.runs.push(Run { text, shift });
        }
    }

    /// A plain level or irrep label (`5a1`, `2pi_u`, `3sigma_g+`, `1e''`); anything else stays as it is.
    pub(crate) fn level(plain: &str) -> Self {
        let digits = plain.len() - plain.trim_start_matches(|c: char| c.is_ascii_digit()).len();
        let (number, irrep) = plain.split_at(digits);
        let Some((base, sub, sup)) = irrep_parts(irrep) else {
            return Self::plain(plain);
        };
        let mut lettering = Self::plain(format!("{number}{base}"));
        lettering.push(sub, Shift::Sub);
        lettering.push(sup, Shift::Super);
        lettering
    }

    /// A plain point-group name (`C2v`, `Dinfh`): the letter, the rest as a subscript.
    pub(crate) fn group(plain: &str) -> Self {
        let mut letters = plain.chars();
        let mut lettering = Self::plain(letters.next().map(String::from).unwrap_or_default());
        lettering.push(letters.as_str().replace("inf", "∞"), Shift::Sub);
        lettering
    }

    /// A formula with its charge: numbers as subscripts, charge as a superscript.
    pub(crate) fn formula(formula: &str, charge: &str) -> Self {
        let mut lettering = Self::default();
        for c in formula.chars() {
            let shift = if c.is_ascii_digit() {
                Shift::Sub
            } else {
                Shift::None
            };
            match lettering.runs.last_mut() {
                Some(run) if run.shift == shift => run.text.push(c),
                _ => lettering.push(c, shift),
            }
        }
        lettering.push(charge, Shift::Super);
        lettering
    }

    /// The label in one line of Unicode, as in `5a₁`, `3σg⁺`.
    pub(crate) fn unicode(&self) -> String {
        let mut text = String::new();
        for run in &self.runs {
            match run.shift {
                Shift::None => text.push_str(&run.text),
                Shift::Sub => text.extend(run.text.chars().map(subscript)),
                Shift::Super => text.extend(run.text.chars().map(superscript)),
            }
        }
        text
    }

    /// Width at a font size, in the unit of the size. A subscript followed by a superscript stands
    /// below it, so that the wider of both counts.
    pub(crate) fn width(&self, size: f64) -> f64 {
        let mut width = 0.0;
        let mut below = 0.0;
        for run in &self.runs {
            let own = text_width(&run.text) * size;
            match run.shift {
                Shift::None => {
                    width += below + own;
                    below = 0.0;
                }
                Shift::Sub => {
                    width += below;
                    below = own * SMALL;
                }
                Shift::Super => {
                    width += f64::max(below, own * run.scale());
                    below = 0.0;
                }
            }
        }
        width + below
    }
}

fn irrep_parts(irrep: &str) -> Option<(String, String, String)> {
    const GREEK: [(&str, char); 5] = [
        ("sigma", 'σ'),
        ("pi", 'π'),
        ("delta", 'δ'),
        ("phi", 'φ'),
        ("gamma", 'γ'),
    ];
    let tail = irrep.trim_start_matches(|c: char| c.is_ascii_alphanumeric() || c == '_');
    let body = &irrep[..irrep.len() - tail.len()];
    let sup = match tail {
        "" => "",
        "'" => "′",
        "''" => "″",
        "+" => "+",
        "-" => "\u{2212}",
        _ => return None,
    };
    for (name, letter) in GREEK {
        if let Some(rest) = body.strip_prefix(name) {
            let parity = rest.strip_prefix('_').unwrap_or(rest);
            return matches!(parity, "" | "g" | "u")
                .then(|| (letter.to_string(), parity.to_owned(), sup.to_owned()));
        }
    }
    let mut letters = body.chars();
    let base = letters.next().filter(|c| "abegtghi".contains(*c))?;
    let rest = letters.as_str();
    let fits = rest
        .chars()
        .all(|c| c.is_ascii_digit() || c == 'g' || c == 'u');
    fits.then(|| (base.to_string(), rest.to_owned(), sup.to_owned()))
}

fn subscript(c: char) -> char {
    match c.to_digit(10) {
        Some(digit) => char::from_u32(0x2080 + digit).unwrap_or(c),
        None => c,
    }
}

fn superscript(c: char) -> char {
    match c {
        '+' => '⁺',
        '\u{2212}' => '⁻',
        '1' => '¹',
        '2' => '²',
        '3' => '³',
        '0' | '4'..='9' => char::from_u32(0x2070 + c as u32 - '0' as u32).unwrap_or(c),
        _ => c,
    }
}

/// Advance width at size 1: the common widths of sans-serif faces (Helvetica and its relatives).
fn text_width(text: &str) -> f64 {
    text.chars().map(letter_width).sum()
}

fn letter_width(c: char) -> f64 {
    match c {
        'i' | 'j' | 'l' | '\'' | '′' | '|' => 0.24,
        'f' | 't' | ' ' | '.' | ',' | ':' | ';' | '/' | '(' | ')' => 0.30,
        'r' | '-' | '°' | '″' | '¹' | '²' | '³' => 0.36,
        'c' | 'k' | 's' | 'v' | 'x' | 'y' | 'z' | 'J' => 0.50,
        'm' | 'M' | 'W' => 0.86,
        'w' | 'C' | 'D' | 'G' | 'H' | 'N' | 'O' | 'Q' | 'R' | 'U' | '∞' | 'Δ' | 'Σ' => 0.73,
        'A'..='Z' => 0.66,
        '+' | '\u{2212}' | '=' => 0.59,
        _ => 0.57,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn plain_labels_become_unicode() {
        for (plain, display) in [
            ("5a1", "5a₁"),
            ("2pi_u", "2πu"),
            ("3sigma_g+", "3σg⁺"),
            ("1sigma-", "1σ⁻"),
            ("2b2g", "2b₂g"),
            ("4a1'", "4a₁′"),
            ("1e''", "1e″"),
            ("3t1u", "3t₁u"),
            ("2gg", "2gg"),
            ("delta_g", "δg"),
            ("?", "?"),
        ] {
            assert_eq!(Lettering::level(plain).unicode(), display);
        }
        assert_eq!(Lettering::group("Dinfh").runs[1].text, "∞h");
        assert_eq!(
            Lettering::formula("PtCl4", "2\u{2212}").unicode(),
            "PtCl₄²⁻"
        );
    }

    #[test]
    fn words_hold_superscripts() {
        let found = Lettering::words("ψ in bohr^{\u{2212}3/2}, here");
        assert_eq!(found.runs.len(), 3);
        assert_eq!(found.runs[1].shift, Shift::Super);
        assert_eq!(found.runs[2].text, ", here");
    }

    #[test]
    fn a_superscript_stands_above_its_subscript() {
        let both = Lettering::level("3sigma_g+").width(10.0);
        let one = Lettering::level("3sigma+").width(10.0);
        assert!((both - one).abs() < 0.5);
    }
}
