//! SVG without fonts: every text as the outline of its letters.

use std::fmt::Write;

use resvg::usvg::{self, Node, tiny_skia_path::PathSegment};

use super::{ImageError, drawing};
use crate::figure::xml::{escape, length};

/// The same SVG with every text as a path (its words kept as `aria-label`), for printers that refuse
/// live text. Title, description, data and everything else stay.
///
/// # Errors
/// Text that is no SVG, or a text without outlines.
pub fn outline_text(svg: &str) -> Result<String, ImageError> {
    let tree = drawing(svg)?;
    let mut outlines = Vec::new();
    collect(tree.root(), &mut outlines);
    let mut parts = svg.split("<text ");
    let mut made = parts.next().unwrap_or_default().to_owned();
    let mut texts = 0;
    for part in parts {
        let Some((element, rest)) = part.split_once("</text>") else {
            continue;
        };
        let (attributes, words) = element.split_once('>').unwrap_or((element, ""));
        if let Some(outline) = outlines.get(texts) {
            let _ = write!(
                made,
                "<path aria-label=\"{}\" d=\"{outline}\"",
                escape(&plain(words))
            );
            for attribute in attributes.split("\" ") {
                let (key, value) = attribute.split_once("=\"").unwrap_or((attribute, ""));
                if !matches!(key.trim(), "x" | "y" | "font-size" | "text-anchor") {
                    let _ = write!(made, " {}=\"{}\"", key.trim(), value.trim_end_matches('"'));
                }
            }
            made.push_str("/>");
        }
        texts += 1;
        made.push_str(rest);
    }
    if texts == outlines.len() {
        Ok(made)
    } else {
        Err(ImageError::Outlines {
            found: outlines.len(),
            texts,
        })
    }
}

/// Words without their markup; characters that XML reserves as they are.
fn plain(markup: &str) -> String {
    let mut text = String::new();
    let mut inside = false;
    for letter in markup.chars() {
        match letter {
            '<' => inside = true,
            '>' => inside = false,
            other if !inside => text.push(other),
            _ => {}
        }
    }
    text.replace("&lt;", "<")
        .replace("&gt;", ">")
        .replace("&quot;", "\"")
        .replace("&amp;", "&")
}

/// The outlines of all texts in the order of the file, in the text's own coordinates.
fn collect(group: &usvg::Group, outlines: &mut Vec<String>) {
    for node in group.children() {
        match node {
            Node::Group(inner) => collect(inner, outlines),
            Node::Text(text) => {
                let mut outline = String::new();
                letters(text.flattened(), &mut outline);
                outlines.push(outline);
            }
            _ => {}
        }
    }
}

fn letters(group: &usvg::Group, outline: &mut String) {
    for node in group.children() {
        match node {
            Node::Group(inner) => letters(inner, outline),
            Node::Path(path) => {
                for segment in path.data().segments() {
                    draw(segment, outline);
                }
            }
            _ => {}
        }
    }
}

fn draw(segment: PathSegment, outline: &mut String) {
    let at = |x: f32, y: f32| format!("{} {}", length(x.into()), length(y.into()));
    let _ = match segment {
        PathSegment::MoveTo(to) => write!(outline, "M{}", at(to.x, to.y)),
        PathSegment::LineTo(to) => write!(outline, "L{}", at(to.x, to.y)),
        PathSegment::QuadTo(a, to) => write!(outline, "Q{} {}", at(a.x, a.y), at(to.x, to.y)),
        PathSegment::CubicTo(a, b, to) => write!(
            outline,
            "C{} {} {}",
            at(a.x, a.y),
            at(b.x, b.y),
            at(to.x, to.y)
        ),
        PathSegment::Close => write!(outline, "Z"),
    };
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::export::figure_png;
    use crate::{FigureOptions, sweep_figure, synthetic};

    #[test]
    fn outlines_look_like_the_text_and_need_no_font() {
        let figure =
            sweep_figure(&synthetic::silicon_difluoride(), &FigureOptions::default()).unwrap();
        let outlined = outline_text(&figure).unwrap();
        assert!(!outlined.contains("<text"));
        assert_eq!(
            outlined.matches("<path aria-label").count(),
            figure.matches("<text ").count()
        );
        for kept in ["<title", "<desc", "<metadata>", "aria-label=\"SiF2\""] {
            assert!(outlined.contains(kept), "{kept}");
        }
        let (text, paths) = (
            figure_png(&figure, 96.0).unwrap(),
            figure_png(&outlined, 96.0).unwrap(),
        );
        let pixels = |bytes: &[u8]| {
            let mut reader = png::Decoder::new(std::io::Cursor::new(bytes.to_vec()))
                .read_info()
                .unwrap();
            let mut pixels = vec![0; reader.output_buffer_size().unwrap()];
            reader.next_frame(&mut pixels).unwrap();
            pixels
        };
        let (text, paths) = (pixels(&text), pixels(&paths));
        let apart = text
            .iter()
            .zip(&paths)
            .filter(|(a, b)| a.abs_diff(**b) > 60)
            .count();
        assert!(apart * 2000 < text.len(), "{apart} of {}", text.len());
    }
}
