//! Names of irreps by Mulliken's rules, read off the characters, and their forms for print.

use crate::element::Family;

/// Characters of one irrep at the operations that its name depends on.
#[derive(Clone, Debug, Default)]
pub(crate) struct Marks {
    pub(crate) dimension: usize,
    /// At the smallest turn about z (C or S).
    pub(crate) principal: f64,
    /// At C2 about z, y and x (D2 and D2h).
    pub(crate) twofold: Option<[f64; 3]>,
    /// At C2 along x (dihedral groups), or at the mirror plane xz (Cnv), or at C4 or S4 (O, Td).
    pub(crate) second: Option<f64>,
    /// At the inversion.
    pub(crate) inversion: Option<f64>,
    /// At the plane across z.
    pub(crate) horizontal: Option<f64>,
}

/// A name in its parts.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Parts {
    pub(crate) letter: &'static str,
    /// 0 for none.
    pub(crate) number: u32,
    /// "", "g", "u", "'" or "''".
    pub(crate) parity: &'static str,
    /// "", "+" or "-".
    pub(crate) sign: &'static str,
}

/// The parts of the names of all irreps of a finite group; `turn` is the order of the operation
/// at `Marks::principal`.
pub(crate) fn parts(family: Family, turn: u32, marks: &[Marks]) -> Vec<Parts> {
    let mut all: Vec<Parts> = marks.iter().map(|m| one(family, turn, m)).collect();
    // A number is kept only where it tells two irreps apart.
    let alone: Vec<bool> = all
        .iter()
        .map(|p| {
            all.iter()
                .filter(|q| q.letter == p.letter && q.parity == p.parity)
                .count()
                == 1
        })
        .collect();
    for (p, alone) in all.iter_mut().zip(alone) {
        let keeps = family.is_dihedral() || family == Family::CyclicVertical || family.is_cubic();
        if alone && (p.letter == "e" || !keeps) {
            p.number = 0;
        }
    }
    all
}

fn one(family: Family, turn: u32, m: &Marks) -> Parts {
    let parity = match (m.inversion, m.horizontal) {
        (Some(i), _) => {
            if i > 0.0 {
                "g"
            } else {
                "u"
            }
        }
        (None, Some(h)) => {
            if h > 0.0 {
                "'"
            } else {
                "''"
            }
        }
        (None, None) => "",
    };
    let second = match m.second {
        Some(x) if x > 0.0 => 1,
        Some(_) => 2,
        None => 0,
    };
    let (letter, number) = match m.dimension {
        1 => match m.twofold {
            Some([z, y, x]) => match (z > 0.0, y > 0.0, x > 0.0) {
                (true, true, _) => ("a", 0),
                (true, false, _) => ("b", 1),
                (false, true, _) => ("b", 2),
                (false, false, _) => ("b", 3),
            },
            None if !family.is_cubic() && turn.is_multiple_of(2) && m.principal < 0.0 => {
                ("b", second)
            }
            None => ("a", second),
        },
        2 => (
            "e",
            if family.is_cubic() {
                0
            } else {
                wave(m.principal, turn)
            },
        ),
        3 => (
            "t",
            if matches!(family, Family::I | Family::Ih) {
                // C5 of the vector representation has 1 + 2 cos 72° > 0.
                if m.principal > 0.0 { 1 } else { 2 }
            } else {
                second
            },
        ),
        4 => ("g", 0),
        _ => ("h", 0),
    };
    Parts {
        letter,
        number,
        parity,
        sign: "",
    }
}

/// The parts of the name of an irrep of the stand-in of a linear group, `second` at a plane
/// through the axis; `None` for the irreps that no orbital up to l = 3 reaches.
pub(crate) fn linear(turn: u32, m: &Marks) -> Option<Parts> {
    let k = match m.dimension {
        1 if m.principal < 0.0 => return None,
        1 => 0,
        _ => wave(m.principal, turn),
    };
    let letter = *Parts::LINEAR.get(k as usize)?;
    let sign = match (k, m.second) {
        (0, Some(x)) if x > 0.0 => "+",
        (0, _) => "-",
        _ => "",
    };
    let parity = match m.inversion {
        Some(i) if i > 0.0 => "g",
        Some(_) => "u",
        None => "",
    };
    Some(Parts {
        letter,
        number: 0,
        parity,
        sign,
    })
}

/// k where the character at a turn of 1/n is 2 cos(2πk/n).
fn wave(character: f64, n: u32) -> u32 {
    let mut best = (f64::INFINITY, 0);
    for k in 1..=n / 2 {
        let angle = 2.0 * std::f64::consts::PI * f64::from(k) / f64::from(n);
        let miss = (2.0 * libm::cos(angle) - character).abs();
        if miss < best.0 {
            best = (miss, k);
        }
    }
    best.1
}

impl Parts {
    /// Letters of linear molecules for 0, 1, 2, 3 units of angular momentum about the axis.
    pub(crate) const LINEAR: [&'static str; 4] = ["sigma", "pi", "delta", "phi"];

    /// ASCII form: `b1`, `e1g`, `a2''`, `sigma_g+`, `pi`.
    pub(crate) fn plain(&self) -> String {
        let mut out = self.letter.to_owned();
        if self.number > 0 {
            out.push_str(&self.number.to_string());
        }
        if !self.parity.is_empty() && Self::LINEAR.contains(&self.letter) {
            out.push('_');
        }
        out.push_str(self.parity);
        out.push_str(self.sign);
        out
    }

    /// Form for print: `b₁`, `e₁g`, `a₂″`, `σg⁺`, `π`.
    pub(crate) fn display(&self) -> String {
        let mut out = match self.letter {
            "sigma" => "σ".to_owned(),
            "pi" => "π".to_owned(),
            "delta" => "δ".to_owned(),
            "phi" => "φ".to_owned(),
            letter => letter.to_owned(),
        };
        if self.number > 0 {
            for digit in self.number.to_string().bytes() {
                let offset = u32::from(digit - b'0');
                out.push(char::from_u32(0x2080 + offset).unwrap_or('?'));
            }
        }
        out.push_str(match self.parity {
            "'" => "′",
            "''" => "″",
            other => other,
        });
        out.push_str(match self.sign {
            "+" => "⁺",
            "-" => "⁻",
            other => other,
        });
        out
    }

    /// Sorting key of the usual order: g before u, ' before ''; a, b, e, t, g, h.
    pub(crate) fn key(&self) -> (u8, u8, u32, u8) {
        let parity = u8::from(matches!(self.parity, "u" | "''"));
        let letter = match self.letter {
            "a" | "sigma" | "s" => 0,
            "b" | "pi" | "p" => 1,
            "e" | "delta" | "d" => 2,
            "t" | "phi" | "f" => 3,
            "g" => 4,
            _ => 5,
        };
        (parity, letter, self.number, u8::from(self.sign == "-"))
    }
}

/// The name in the other usual choice of axes; see `PointGroup::other_axes`.
pub(crate) fn exchanged(plain: &str, one: char, other: char) -> String {
    let letter_b = plain.trim_start_matches(|c: char| c.is_ascii_digit());
    let start = plain.len() - letter_b.len();
    let mut out = plain[..start].to_owned();
    if !letter_b.starts_with('b') {
        out.push_str(letter_b);
        return out;
    }
    out.extend(letter_b.chars().map(|c| match c {
        c if c == one => other,
        c if c == other => one,
        c => c,
    }));
    out
}
