//! The program answers at all; what it answers is checked in `tests/`.

use std::process::Command;

#[test]
fn help_starts_with_examples_and_bad_words_are_refused() {
    let help = Command::new(env!("CARGO_BIN_EXE_orbend"))
        .arg("--help")
        .output()
        .unwrap();
    assert!(help.status.success());
    assert!(
        String::from_utf8(help.stdout)
            .unwrap()
            .starts_with("Examples:")
    );
    let refused = Command::new(env!("CARGO_BIN_EXE_orbend"))
        .arg("--nonsense")
        .output()
        .unwrap();
    assert_eq!(refused.status.code(), Some(2));
    assert!(refused.stdout.is_empty());
}
