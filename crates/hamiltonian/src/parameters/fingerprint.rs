//! SHA-256 over the values in use.

use std::fmt::Write;

use sha2::{Digest, Sha256};

use super::element::ElementParameters;

/// One line per element and shell in use, elements by atomic number: symbol, shell, Hᵢᵢ in eV,
/// (exponent:coefficient) pairs as published. Numbers are written so that they read back to the
/// same double; sources and names do not enter.
pub(crate) fn canonical_text<'a>(elements: impl Iterator<Item = &'a ElementParameters>) -> String {
    let mut text = String::new();
    for element in elements {
        for shell in element.shells() {
            // Writing to a String cannot fail.
            let _ = write!(
                text,
                "{} {} {:?}",
                element.element().symbol(),
                shell.name(),
                shell.hii_ev
            );
            for (zeta, coefficient) in &shell.published {
                let _ = write!(text, " {zeta:?}:{coefficient:?}");
            }
            text.push('\n');
        }
    }
    text
}

/// `sha256:` and 64 hexadecimal digits.
pub(crate) fn fingerprint(text: &str) -> String {
    let digest = Sha256::digest(text.as_bytes());
    let mut out = String::from("sha256:");
    for byte in &digest[..] {
        let _ = write!(out, "{byte:02x}");
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn known_digest() {
        // FIPS 180-4 example "abc".
        assert_eq!(
            fingerprint("abc"),
            "sha256:ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"
        );
    }
}
