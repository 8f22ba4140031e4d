//! The committed figures.

use crate::figure::options::FigureOptions;
use crate::figure::{sweep, xml};
use crate::synthetic;

/// A page with both figures side by side and the lines of one that the other has not.
fn differences(before: &str, after: &str) -> String {
    let only = |text: &str, other: &str| -> String {
        let known: std::collections::BTreeSet<&str> = other.lines().collect();
        text.lines()
            .filter(|line| !known.contains(line) && !line.contains("<metadata>"))
            .map(|line| format!("{}\n", xml::escape(line)))
            .collect()
    };
    let column = |title: &str, figure: &str, lines: String| {
        format!("<td valign=\"top\"><h2>{title}</h2>{figure}<pre>{lines}</pre></td>")
    };
    format!(
        "<!doctype html><meta charset=\"utf-8\"><table><tr>{}{}</tr></table>",
        column("committed", before, only(before, after)),
        column("now", after, only(after, before))
    )
}

#[test]
fn a_changed_figure_shows_its_changed_lines() {
    let page = differences("<svg>\n<a/>\n<b/>\n</svg>", "<svg>\n<a/>\n<c/>\n</svg>");
    assert!(page.contains("<pre>&lt;b/&gt;\n</pre>") && page.contains("<pre>&lt;c/&gt;\n</pre>"));
}

/// The committed figures, byte for byte: a change shows in review.
#[test]
fn committed_figures_are_current() {
    let directory = concat!(env!("CARGO_MANIFEST_DIR"), "/golden");
    let documents = [
        ("h2s", synthetic::hydrogen_sulfide()),
        ("sif2", synthetic::silicon_difluoride()),
        ("bf3", synthetic::boron_trifluoride()),
    ];
    for (name, document) in documents {
        let svg = sweep::sweep_figure(&document, &FigureOptions::default()).unwrap();
        let file = format!("{directory}/{name}.svg");
        if std::env::var_os("ORBEND_UPDATE").is_some() {
            std::fs::write(&file, &svg).unwrap();
        }
        let committed = std::fs::read_to_string(&file).unwrap_or_default();
        if committed != svg {
            let page = std::env::temp_dir().join(format!("orbend-figure-{name}.html"));
            std::fs::write(&page, differences(&committed, &svg)).unwrap();
            panic!(
                "{file} differs, see {}; after a look refresh it with: ORBEND_UPDATE=1 cargo test -p orbend-report",
                page.display()
            );
        }
    }
}
