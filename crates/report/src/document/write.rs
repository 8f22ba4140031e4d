//! Writing a document as JSON: outer keys on lines of their own, each point or line on one line.

use std::io;

use serde::Serialize;
use serde_json::ser::{Formatter, Serializer};

use super::read::DocumentError;

/// Nesting depth down to which every value has its own line.
const OPEN_DEPTH: usize = 2;

/// The document as JSON text (UTF-8, RFC 8259), ending with a line feed. Every number reads back to
/// the same double; equal documents give equal bytes.
pub fn to_json<D: Serialize>(document: &D) -> Result<String, DocumentError> {
    let mut bytes = Vec::new();
    let mut serializer = Serializer::with_formatter(&mut bytes, Outline::default());
    document
        .serialize(&mut serializer)
        .map_err(DocumentError::from_serde)?;
    bytes.push(b'\n');
    String::from_utf8(bytes).map_err(|_| DocumentError::NotUtf8)
}

#[derive(Default)]
struct Outline {
    depth: usize,
    empty: Vec<bool>,
}

impl Outline {
    fn begin(&mut self) {
        self.depth += 1;
        self.empty.push(true);
    }

    fn end<W: ?Sized + io::Write>(&mut self, writer: &mut W) -> io::Result<()> {
        let empty = self.empty.pop().unwrap_or(true);
        let open = self.depth <= OPEN_DEPTH;
        self.depth = self.depth.saturating_sub(1);
        if open && !empty {
            self.line(writer)
        } else {
            Ok(())
        }
    }

    fn line<W: ?Sized + io::Write>(&self, writer: &mut W) -> io::Result<()> {
        writer.write_all(b"\n")?;
        for _ in 0..self.depth {
            writer.write_all(b"  ")?;
        }
        Ok(())
    }

    fn item<W: ?Sized + io::Write>(&mut self, writer: &mut W, first: bool) -> io::Result<()> {
        if let Some(empty) = self.empty.last_mut() {
            *empty = false;
        }
        if !first {
            writer.write_all(b",")?;
        }
        if self.depth <= OPEN_DEPTH {
            self.line(writer)
        } else if first {
            Ok(())
        } else {
            writer.write_all(b" ")
        }
    }
}

impl Formatter for Outline {
    fn begin_array<W: ?Sized + io::Write>(&mut self, writer: &mut W) -> io::Result<()> {
        self.begin();
        writer.write_all(b"[")
    }

    fn end_array<W: ?Sized + io::Write>(&mut self, writer: &mut W) -> io::Result<()> {
        self.end(writer)?;
        writer.write_all(b"]")
    }

    fn begin_array_value<W: ?Sized + io::Write>(
        &mut self,
        writer: &mut W,
        first: bool,
    ) -> io::Result<()> {
        self.item(writer, first)
    }

    fn begin_object<W: ?Sized + io::Write>(&mut self, writer: &mut W) -> io::Result<()> {
        self.begin();
        writer.write_all(b"{")
    }

    fn end_object<W: ?Sized + io::Write>(&mut self, writer: &mut W) -> io::Result<()> {
        self.end(writer)?;
        writer.write_all(b"}")
    }

    fn begin_object_key<W: ?Sized + io::Write>(
        &mut self,
        writer: &mut W,
        first: bool,
    ) -> io::Result<()> {
        self.item(writer, first)
    }

    fn begin_object_value<W: ?Sized + io::Write>(&mut self, writer: &mut W) -> io::Result<()> {
        writer.write_all(b": ")
    }
}
