//! Three molecules.

use super::{Frame, Sketch, shape, sketch, sweep};
use crate::document::*;

/// Bending of H2S, much as Walsh drew AH2.
pub(crate) fn hydrogen_sulfide() -> SweepDocument {
    let xs: Vec<f64> = (0..=60).map(|k| 60.0 + 2.0 * f64::from(k)).collect();
    let frame = Frame {
        formula: "H2S",
        elements: &["S", "H", "H"],
        kind: MotionKind::Bend,
        unit: CoordinateUnit::Degree,
        atoms: &[2, 1, 3],
        groups: ("C2v", "C2v", "Dinfh"),
        electrons: 8,
    };
    let lines = [
        sketch(
            ("4a1", "1a1", "a1"),
            ("4a1", "4sigma_g+"),
            shape(&xs, &[-23.4, 1.9, -0.6]),
        ),
        sketch(
            ("2b2", "1b2", "b2"),
            ("2b2", "3sigma_u+"),
            shape(&xs, &[-13.1, -5.2, 2.6]),
        ),
        sketch(
            ("5a1", "2a1", "a1"),
            ("5a1", "2pi_u"),
            shape(&xs, &[-15.4, 1.2, 1.4, 1.8]),
        ),
        sketch(("2b1", "1b1", "b1"), ("2b1", "2pi_u"), shape(&xs, &[-11.0])),
        sketch(
            ("6a1", "3a1", "a1"),
            ("6a1", "5sigma_g+"),
            shape(&xs, &[-1.0, 5.2, -1.9, 1.1]),
        ),
        sketch(
            ("3b2", "2b2", "b2"),
            ("3b2", "4sigma_u+"),
            shape(&xs, &[-3.5, 9.0, -1.0, 3.5]),
        ),
    ];
    sweep(&frame, &xs, &lines)
}

/// A triatomic with two second-row ends: twelve lines, two of them deep.
pub(crate) fn silicon_difluoride() -> SweepDocument {
    let xs: Vec<f64> = (0..=50).map(|k| 80.0 + 2.0 * f64::from(k)).collect();
    let frame = Frame {
        formula: "F2Si",
        elements: &["Si", "F", "F"],
        kind: MotionKind::Bend,
        unit: CoordinateUnit::Degree,
        atoms: &[2, 1, 3],
        groups: ("C2v", "C2v", "Dinfh"),
        electrons: 18,
    };
    let lines = [
        sketch(
            ("5a1", "1a1", "a1"),
            ("5a1", "5sigma_g+"),
            shape(&xs, &[-40.9, 0.1]),
        ),
        sketch(
            ("3b2", "1b2", "b2"),
            ("3b2", "4sigma_u+"),
            shape(&xs, &[-40.3, -0.3]),
        ),
        sketch(
            ("6a1", "2a1", "a1"),
            ("6a1", "6sigma_g+"),
            shape(&xs, &[-20.2, 0.9, -0.2]),
        ),
        sketch(
            ("4b2", "2b2", "b2"),
            ("4b2", "5sigma_u+"),
            shape(&xs, &[-19.2, -0.8, 0.3]),
        ),
        sketch(
            ("2b1", "1b1", "b1"),
            ("2b1", "2pi_u"),
            shape(&xs, &[-18.9, 0.1]),
        ),
        sketch(
            ("7a1", "3a1", "a1"),
            ("7a1", "2pi_u"),
            shape(&xs, &[-18.6, 0.2, -0.4]),
        ),
        sketch(
            ("5b2", "3b2", "b2"),
            ("5b2", "1pi_g"),
            shape(&xs, &[-17.7, -0.7, 0.3]),
        ),
        sketch(("1a2", "1a2", "a2"), ("1a2", "1pi_g"), shape(&xs, &[-18.1])),
        sketch(
            ("8a1", "4a1", "a1"),
            ("8a1", "3pi_u"),
            shape(&xs, &[-13.9, 1.4, 3.6]),
        ),
        sketch(
            ("3b1", "2b1", "b1"),
            ("3b1", "3pi_u"),
            shape(&xs, &[-8.3, -0.6]),
        ),
        sketch(
            ("9a1", "5a1", "a1"),
            ("9a1", "7sigma_g+"),
            shape(&xs, &[1.8, 5.0, 7.0]),
        ),
        sketch(
            ("6b2", "4b2", "b2"),
            ("6b2", "6sigma_u+"),
            shape(&xs, &[4.0, 9.0, 12.0]),
        ),
    ];
    let mut document = sweep(&frame, &xs, &lines);
    document.molecule.title = "SiF2".into();
    document
}

/// Pyramidal to planar AX3 with degenerate sets.
pub(crate) fn boron_trifluoride() -> SweepDocument {
    let xs: Vec<f64> = (0..=30).map(|k| 90.0 + f64::from(k)).collect();
    let frame = Frame {
        formula: "BF3",
        elements: &["B", "F", "F", "F"],
        kind: MotionKind::Pyramid,
        unit: CoordinateUnit::Degree,
        atoms: &[1],
        groups: ("C3v", "C3v", "D3h"),
        electrons: 24,
    };
    let set = |names, ends, energies| Sketch {
        degeneracy: 2,
        ..sketch(names, ends, energies)
    };
    let lines = [
        sketch(
            ("3a1", "1a1", "a1"),
            ("3a1", "3a1'"),
            shape(&xs, &[-41.9, 0.2]),
        ),
        set(("2e", "1e", "e"), ("2e", "2e'"), shape(&xs, &[-40.2, -0.4])),
        sketch(
            ("4a1", "2a1", "a1"),
            ("4a1", "4a1'"),
            shape(&xs, &[-20.7, 0.3]),
        ),
        set(("3e", "2e", "e"), ("3e", "3e'"), shape(&xs, &[-18.7, -0.9])),
        sketch(
            ("5a1", "3a1", "a1"),
            ("5a1", "1a2''"),
            shape(&xs, &[-19.4, 0.4, -0.3]),
        ),
        set(("4e", "3e", "e"), ("4e", "4e'"), shape(&xs, &[-17.9, -0.2])),
        set(
            ("5e", "4e", "e"),
            ("5e", "1e''"),
            shape(&xs, &[-17.4, -0.4]),
        ),
        sketch(
            ("1a2", "1a2", "a2"),
            ("1a2", "1a2'"),
            shape(&xs, &[-16.9, -0.3]),
        ),
        sketch(
            ("6a1", "4a1", "a1"),
            ("6a1", "2a2''"),
            shape(&xs, &[-10.8, 3.0, 1.1]),
        ),
        set(
            ("6e", "5e", "e"),
            ("6e", "5e'"),
            shape(&xs, &[4.0, 6.0, 5.0]),
        ),
    ];
    sweep(&frame, &xs, &lines)
}
