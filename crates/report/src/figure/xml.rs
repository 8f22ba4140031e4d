//! Writing well-formed XML.

use std::fmt::Write;

/// Text with the characters that XML reserves replaced; characters that XML 1.0 forbids are dropped.
pub(crate) fn escape(text: &str) -> String {
    let mut escaped = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '&' => escaped.push_str("&amp;"),
            '<' => escaped.push_str("&lt;"),
            '>' => escaped.push_str("&gt;"),
            '"' => escaped.push_str("&quot;"),
            '\t' | '\n' | '\r' => escaped.push(c),
            c if (c as u32) < 0x20 || matches!(c as u32, 0xFFFE | 0xFFFF) => {}
            c => escaped.push(c),
        }
    }
    escaped
}

/// A length with at most two decimals, as short as possible.
pub(crate) fn length(value: f64) -> String {
    let text = format!("{value:.2}");
    let text = text.trim_end_matches('0').trim_end_matches('.');
    if text == "-0" {
        "0".to_owned()
    } else {
        text.to_owned()
    }
}

/// An XML text under construction.
#[derive(Default)]
pub(crate) struct Writer {
    text: String,
    open: Vec<&'static str>,
}

impl Writer {
    fn indent(&mut self) {
        for _ in 0..self.open.len() {
            self.text.push(' ');
        }
    }

    fn tag(&mut self, name: &str, attributes: &[(&str, &str)]) {
        let _ = write!(self.text, "<{name}");
        for (key, value) in attributes {
            let _ = write!(self.text, " {key}=\"{}\"", escape(value));
        }
    }

    /// Opens an element.
    pub(crate) fn open(&mut self, name: &'static str, attributes: &[(&str, &str)]) {
        self.indent();
        self.tag(name, attributes);
        self.text.push_str(">\n");
        self.open.push(name);
    }

    /// Closes the element opened last.
    pub(crate) fn close(&mut self) {
        if let Some(name) = self.open.pop() {
            self.indent();
            let _ = writeln!(self.text, "</{name}>");
        }
    }

    /// An element without content.
    pub(crate) fn empty(&mut self, name: &str, attributes: &[(&str, &str)]) {
        self.indent();
        self.tag(name, attributes);
        self.text.push_str("/>\n");
    }

    /// An element with text.
    pub(crate) fn text(&mut self, name: &str, attributes: &[(&str, &str)], content: &str) {
        self.with_markup(name, attributes, &escape(content));
    }

    /// An element with content that is XML already.
    pub(crate) fn with_markup(&mut self, name: &str, attributes: &[(&str, &str)], markup: &str) {
        self.indent();
        self.tag(name, attributes);
        let _ = writeln!(self.text, ">{markup}</{name}>");
    }

    /// Takes over the finished elements of another text.
    pub(crate) fn append(&mut self, other: Self) {
        self.text.push_str(&other.finish());
    }

    /// Closes what is open and returns the text.
    pub(crate) fn finish(mut self) -> String {
        while !self.open.is_empty() {
            self.close();
        }
        self.text
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn reserved_characters_are_replaced() {
        assert_eq!(escape("a<b & \"c\"\u{1}"), "a&lt;b &amp; &quot;c&quot;");
    }

    #[test]
    fn lengths_are_short() {
        assert_eq!(length(-0.001), "0");
        assert_eq!(length(12.5), "12.5");
        assert_eq!(length(100.0), "100");
    }

    #[test]
    fn everything_opened_is_closed() {
        let mut writer = Writer::default();
        writer.open("g", &[("id", "a\"b")]);
        writer.empty("path", &[]);
        assert_eq!(writer.finish(), "<g id=\"a&quot;b\">\n <path/>\n</g>\n");
    }
}
