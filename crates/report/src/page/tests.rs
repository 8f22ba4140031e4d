//! Checks of the page's text; what it does in a browser is checked in tests/browser.

use super::*;
use crate::synthetic;

fn made() -> String {
    sweep_page(&synthetic::silicon_difluoride(), &FigureOptions::default()).unwrap()
}

#[test]
fn refers_to_nothing_outside() {
    // The only address is the name of the SVG form, which nothing fetches.
    let page = made().replace("http://www.w3.org/2000/svg", "");
    for word in [
        "http:", "https:", "//cdn", " src=", "@import", "url(http", "fetch(", "XMLHttp",
    ] {
        assert!(!page.contains(word), "{word}");
    }
}

#[test]
fn the_policy_lets_only_this_script_and_style_run() {
    let page = made();
    let between = |from: &str, to: &str| {
        let start = page.find(from).unwrap() + from.len();
        &page[start..start + page[start..].find(to).unwrap()]
    };
    let policy = between("Content-Security-Policy\" content=\"", "\"");
    assert!(policy.starts_with("default-src 'none'") && !policy.contains("unsafe"));
    assert!(policy.contains(&format!(
        "script-src '{}'",
        digest(between("<script>", "</script>"))
    )));
    assert!(policy.contains(&format!(
        "style-src '{}'",
        digest(between("<style>", "</style>"))
    )));
    // Styles in attributes would be refused by it.
    assert!(!page.contains(" style=\""));
}

#[test]
fn every_element_is_closed() {
    let page = made();
    let body = &page[..page.find("<script>").unwrap()];
    let mut open: Vec<&str> = Vec::new();
    for piece in body.split('<').skip(1) {
        let tag = &piece[..piece.find('>').unwrap_or(piece.len())];
        if let Some(name) = tag.strip_prefix('/') {
            assert_eq!(open.pop(), Some(name));
            continue;
        }
        let name = tag.split([' ', '\n']).next().unwrap();
        if !tag.ends_with('/') && !["!DOCTYPE", "meta", "input"].contains(&name) {
            open.push(name);
        }
    }
    assert_eq!(open, ["html", "body"]);
}

#[test]
fn text_of_the_input_stays_text() {
    let mut document = synthetic::silicon_difluoride();
    document.warnings.push(crate::Warning {
        code: "x".into(),
        text: "</script><script>alert(1)</script>".into(),
    });
    document.molecule.elements[0] = "</script>".into();
    let page = sweep_page(&document, &FigureOptions::default()).unwrap();
    assert!(!page.contains("<script>alert"));
    assert_eq!(page.matches("</script>").count(), 2);
}

#[test]
fn lines_left_out_are_left_out_of_the_data() {
    let options = FigureOptions {
        lines: Some(vec!["4a1".into()]),
        ..FigureOptions::default()
    };
    let document = synthetic::silicon_difluoride();
    match sweep_page(&document, &options) {
        Ok(page) => assert!(page.len() < made().len()),
        Err(error) => assert!(error.to_string().contains("nearest")),
    }
}

#[test]
fn equal_documents_give_equal_pages() {
    assert_eq!(made(), made());
}
