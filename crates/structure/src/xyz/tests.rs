use super::*;

fn read(text: &str) -> Result<Vec<Frame>, XyzError> {
    read_xyz(text, &XyzOptions::default())
}

fn one(text: &str) -> Frame {
    let mut frames = read(text).unwrap();
    assert_eq!(frames.len(), 1);
    frames.remove(0)
}

/// Line, column, cause and fix of the refusal.
fn refused(text: &str, line: usize, column: usize, cause: &str, fix: &str) {
    let error = read(text).unwrap_err();
    assert_eq!((error.line, error.column), (line, column), "{error}");
    assert!(error.cause.contains(cause), "{error}");
    assert!(error.fix.contains(fix), "{error}");
}

const WATER: &str = "O 0 0 0\nH 0.757 0 0.587\nH -0.757 0 0.587\n";

#[test]
fn plain_file() {
    let frame = one(&format!("3\nwater at rest\n{WATER}"));
    assert_eq!(frame.molecule.formula(), "H2O");
    assert_eq!(frame.molecule.title, "water at rest");
    assert!(frame.notes.is_empty());
    assert!((frame.molecule.positions[2][0] + 0.757).abs() < 1e-300);
    assert!(frame.understood.contains("no charge given"));
}

#[test]
fn line_ends_bom_and_blank_lines() {
    let text = format!("\u{feff}\n3\n\n{WATER}\n\n").replace('\n', "\r\n");
    assert_eq!(one(&text).molecule.len(), 3);
    assert_eq!(one(&text.replace("\r\n", "\r")).molecule.len(), 3);
    assert_eq!(one("1\n\nH 0 0 0").molecule.len(), 1);
}

#[test]
fn extended_comment() {
    let frame = one(&format!(
        "3\ncharge=+1 unpaired=1 title=\"water cation\" Lattice=\"9 0 0 0 9 0 0 0 9\" energy=-76.4\n{WATER}"
    ));
    assert_eq!(
        (frame.molecule.charge, frame.molecule.unpaired),
        (1, Some(1))
    );
    assert_eq!(frame.molecule.title, "water cation");
    assert!(frame.notes[0].contains("Lattice") && frame.notes[1].contains("energy"));
    assert_eq!(
        frame.understood,
        "charge +1, 1 unpaired electron, title \"water cation\""
    );
    let frame = one(&format!(
        "3\nCharge=0 multiplicity=3 it's E = 5\" long\n{WATER}"
    ));
    assert_eq!(frame.molecule.unpaired, Some(2));
    assert_eq!(frame.molecule.title, "it's E = 5\" long");
}

#[test]
fn bare_numbers_are_not_trusted() {
    let frame = one(&format!("3\n1 2\n{WATER}"));
    assert_eq!((frame.molecule.charge, frame.molecule.unpaired), (0, None));
    assert!(frame.notes[0].contains("`1 2` is not read as charge and spin"));
}

#[test]
fn displacement_column() {
    let text = "2\nProperties=id:I:1:species:S:1:pos:R:3:displacement:R:3 charge=0\n1 H 0 0 0 0 0 1\n2 H 0 0 0.74 0 0 -1\n";
    let frame = one(text);
    assert_eq!(
        frame.displacement,
        Some(vec![[0.0, 0.0, 1.0], [0.0, 0.0, -1.0]])
    );
    assert!(frame.notes.is_empty());
    let extra = one("1\n\nH 0 0 0 0.1 0.2 0.3\n");
    assert!(extra.displacement.is_none() && extra.notes[0].contains("3 columns"));
}

#[test]
fn bohr_and_atomic_numbers() {
    let options = XyzOptions {
        unit: LengthUnit::Bohr,
    };
    let frames = read_xyz("2\n\n1 0 0 0\n9 0 0 1.7328\n", &options).unwrap();
    assert_eq!(frames[0].molecule.formula(), "FH");
    assert!((frames[0].molecule.positions[1][2] - 0.916_958_270_7).abs() < 1e-9);
    assert!(frames[0].notes[0].contains("atomic numbers"));
}

#[test]
fn many_frames() {
    let text = format!("3\na\n{WATER}3\nb\n{WATER}\n3\nc\n{WATER}");
    let frames = read(&text).unwrap();
    assert_eq!(frames.len(), 3);
    assert_eq!((frames[1].line, frames[2].line), (6, 12));
}

#[test]
fn refusals() {
    refused("", 1, 1, "empty", "number of atoms");
    refused("\n \n", 1, 1, "empty", "number of atoms");
    refused(
        "O 0 0 0\nH 0 0 1\n",
        1,
        1,
        "begins with an atom",
        "first line",
    );
    refused(
        "three\n\n",
        1,
        1,
        "`three` is not a number of atoms",
        "alone",
    );
    refused("0\n\n", 1, 1, "is 0", "at least 1");
    refused("-3\n\n", 1, 1, "`-3` is not", "alone");
    refused("3", 2, 1, "ends after", "comment line");
    refused(
        &format!("4\n\n{WATER}"),
        6,
        1,
        "announces 4 atoms, but only 3",
        "write 3",
    );
    refused(
        &format!("2\n\n{WATER}"),
        5,
        1,
        "announces 2 atoms, but a further",
        "line 1",
    );
    refused("1\n\nXx 0 0 0\n", 3, 1, "`Xx` is not an element", "H to Rn");
    refused("1\n\n  CL 0 0 0\n", 3, 3, "`CL`", "write Cl if chlorine");
    refused("1\n\nC12 0 0 0\n", 3, 1, "`C12`", "write C if carbon");
    refused("1\n\n92 0 0 0\n", 3, 1, "no element 92", "86");
    refused(
        "1\n\nH 0 0\n",
        3,
        6,
        "needs 4 columns, this one has 3",
        "x, y and z",
    );
    refused("1\n\nH 0 nan 0\n", 3, 5, "`nan` is not a finite", "finite");
    refused("1\n\nH 0 -inf 0\n", 3, 5, "not a finite", "finite");
    refused("1\n\nH 0 1e999 0\n", 3, 5, "not a finite", "finite");
    refused("1\n\nH 0 1.0D-3 0\n", 3, 5, "exponent written with D", "E");
    refused("1\n\nH 0 1,5 0\n", 3, 5, "decimal comma", "point");
    refused("1\n\nH 0 0.1.2 0\n", 3, 5, "not a number", "decimal");
    refused("1\n\nH 0 \u{2212}1.5 0\n", 3, 5, "Unicode minus", "`-`");
    refused(
        "2\n\nH 0 0 0\nH 0 0 0.1\n",
        4,
        1,
        "atoms 1 (H) and 2 (H) are 0.1000 Å apart",
        "apart",
    );
    refused("1\n\nH 1e9 0 0\n", 3, 1, "coordinate x", "10^6");
    refused(
        "1\ncharge=two\nH 0 0 0\n",
        2,
        8,
        "`two` is no value for `charge=`",
        "whole",
    );
    refused("1\ncharge=1.5\nH 0 0 0\n", 2, 8, "`1.5`", "whole");
    refused("1\ncharge=\u{2212}1\nH 0 0 0\n", 2, 8, "`\u{2212}1`", "`-`");
    refused("1\nunpaired=-1\nH 0 0 0\n", 2, 10, "`-1`", "from 0");
    refused("1\ncharge=1 charge=1\nH 0 0 0\n", 2, 10, "twice", "once");
    refused(
        "1\nunpaired=1 multiplicity=1\nH 0 0 0\n",
        2,
        12,
        "contradict",
        "plus 1",
    );
    refused(
        "1\ntitle=\"open\nH 0 0 0\n",
        2,
        7,
        "does not end",
        "close it",
    );
    refused(
        "1\nProperties=pos:R:3\nH 0 0 0\n",
        2,
        12,
        "does not name `species`",
        "species:S:1",
    );
    refused(
        "1\nProperties=pos:R\nH 0 0 0\n",
        2,
        12,
        "name:type:columns",
        "species:S:1",
    );
    refused(
        "99999999999999\n\nH 0 0 0\n",
        4,
        1,
        "only 1 atom lines",
        "write 1",
    );
    refused("1\n\nH 0 0 0\nhello\n", 4, 1, "`hello`", "blank");
}

#[test]
fn bytes_that_are_no_text() {
    let bytes = |bytes: &[u8]| read_xyz_bytes(bytes, &XyzOptions::default());
    assert_eq!(bytes(b"1\n\nH 0 0 0\n").unwrap().len(), 1);
    let error = bytes(b"\x7fELF\x02\x00\x01").unwrap_err();
    assert_eq!((error.line, error.column), (1, 6));
    assert!(error.cause.contains("binary"));
    let error = bytes(b"1\nab\xff\nH 0 0 0\n").unwrap_err();
    assert_eq!((error.line, error.column), (2, 3));
    assert!(
        bytes(b"\xff\xfe1\x00")
            .unwrap_err()
            .cause
            .contains("UTF-16")
    );
}

#[test]
fn written_files_return() {
    let mut molecule = one(&format!("3\ncharge=1 unpaired=1\n{WATER}")).molecule;
    molecule.title = "a \"b\" charge=7".into();
    molecule.positions[0][0] = -1e-13;
    let text = write_xyz(&molecule);
    assert!(!text.contains("-0.0000000000"));
    let back = one(&text).molecule;
    assert_eq!((back.charge, back.unpaired), (1, Some(1)));
    assert_eq!(back.title, "a 'b' charge=7");
    for (a, b) in back.positions.iter().zip(&molecule.positions) {
        assert!(crate::vector::distance(*a, *b) < 1e-10);
    }
}

#[test]
fn a_million_lines_are_read() {
    // A cubic lattice of 100 × 100 × 100 helium atoms, 3 Å apart.
    let mut text = String::from("1000000\nlattice\n");
    for i in 0..1_000_000 {
        let (x, y, z) = (i % 100 * 3, i / 100 % 100 * 3, i / 10_000 * 3);
        text.push_str(&format!("He {x}.0 {y}.0 {z}.0\n"));
    }
    assert_eq!(one(&text).molecule.len(), 1_000_000);
}
