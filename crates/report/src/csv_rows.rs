//! Rows of a table as bytes, made without an allocation per field.

use crate::document::NotFinite;

/// The columns after the coordinates.
const COLUMNS: &str =
    "level,energy_ev,occupation,label,valence_label,full_label,irrep,line,point_group";
/// Ends every row (RFC 4180).
pub(crate) const ROW_END: &[u8] = b"\r\n";

/// The header row.
pub(crate) fn push_header(out: &mut Vec<u8>, coordinates: usize) {
    out.extend_from_slice(b"point,");
    for number in 1..=coordinates {
        out.extend_from_slice(format!("at_{number},").as_bytes());
    }
    out.extend_from_slice(COLUMNS.as_bytes());
    out.extend_from_slice(ROW_END);
}

/// A text, in quotes where a comma, a quote or a line end stands in it.
pub(crate) fn push_text(out: &mut Vec<u8>, text: &str) {
    if !text.contains([',', '"', '\r', '\n']) {
        out.extend_from_slice(text.as_bytes());
        return;
    }
    out.push(b'"');
    out.extend_from_slice(text.replace('"', "\"\"").as_bytes());
    out.push(b'"');
}

/// A whole number.
pub(crate) fn push_count(out: &mut Vec<u8>, count: usize) {
    out.extend_from_slice(itoa::Buffer::new().format(count).as_bytes());
}

/// The shortest decimal number that reads back to the same double, never with an exponent.
pub(crate) fn push_number(out: &mut Vec<u8>, value: f64) -> Result<(), NotFinite> {
    if !value.is_finite() {
        return Err(NotFinite(value));
    }
    // −0.0 + 0.0 is 0.0: equal results are equal bytes.
    let value = value + 0.0;
    let mut buffer = zmij::Buffer::new();
    let text = buffer.format_finite(value);
    if text.contains('e') {
        out.extend_from_slice(value.to_string().as_bytes());
    } else {
        out.extend_from_slice(text.strip_suffix(".0").unwrap_or(text).as_bytes());
    }
    Ok(())
}

/// The beginning of all rows of a point, numbered from 1, with its coordinates.
pub(crate) fn push_head(out: &mut Vec<u8>, number: usize, at: &[f64]) -> Result<(), NotFinite> {
    push_count(out, number);
    out.push(b',');
    for &value in at {
        push_number(out, value)?;
        out.push(b',');
    }
    Ok(())
}

/// `rank,energy,occupation,` of a level, counted from 1.
pub(crate) fn push_level(
    out: &mut Vec<u8>,
    rank: usize,
    energy_ev: f64,
    occupation: f64,
) -> Result<(), NotFinite> {
    push_count(out, rank);
    out.push(b',');
    push_number(out, energy_ev)?;
    out.push(b',');
    push_number(out, occupation)?;
    out.push(b',');
    Ok(())
}

/// The names of a level, its line and its point's group, to the end of the row.
pub(crate) fn push_names(
    out: &mut Vec<u8>,
    [label, valence_label, full_label, irrep]: [&str; 4],
    line: Option<usize>,
    point_group: &str,
) {
    for text in [label, valence_label, full_label, irrep] {
        push_text(out, text);
        out.push(b',');
    }
    if let Some(line) = line {
        push_count(out, line);
    }
    out.push(b',');
    push_text(out, point_group);
    out.extend_from_slice(ROW_END);
}

#[cfg(test)]
mod tests {
    use super::*;

    fn number(value: f64) -> String {
        let mut out = Vec::new();
        push_number(&mut out, value).unwrap();
        String::from_utf8(out).unwrap()
    }

    #[test]
    fn numbers_without_exponent_and_without_a_sign_of_zero() {
        assert_eq!(number(-0.0), "0");
        assert_eq!(number(2.0), "2");
        assert_eq!(number(-13.6), "-13.6");
        assert_eq!(number(1e-9), "0.000000001");
        assert_eq!(number(1e21), "1000000000000000000000");
        assert!(push_number(&mut Vec::new(), f64::NAN).is_err());
    }

    #[test]
    fn quotes_where_they_are_needed() {
        let mut out = Vec::new();
        for text in ["1a1'", "a,b", "say \"no\""] {
            push_text(&mut out, text);
            out.push(b';');
        }
        assert_eq!(out, b"1a1';\"a,b\";\"say \"\"no\"\"\";");
    }

    proptest::proptest! {
        /// The standard library's shortest form is the outside reference.
        #[test]
        fn the_same_digits_as_the_standard_library(bits in proptest::num::u64::ANY, plain in -1e3..1e3_f64) {
            for value in [f64::from_bits(bits), plain] {
                if value.is_finite() {
                    proptest::prop_assert_eq!(number(value), (value + 0.0).to_string());
                }
            }
        }
    }
}
