//! What lanes promise: independence, reports per lane, refusals.

#![allow(clippy::unwrap_used, clippy::panic)] // a failed expectation is the message

mod common;

use common::*;
use orbend_eigen::{EigenError, LaneStatus, LaneWorkspace, solve};

fn bits(x: &[f64]) -> Vec<u64> {
    x.iter().map(|v| v.to_bits()).collect()
}

#[test]
fn a_lane_does_not_depend_on_its_neighbours() {
    for n in [1, 2, 5, 6, 13, 30, 48] {
        let ours = molecule_like(n, 1);
        let mut room = LaneWorkspace::new(n);
        let (h, s) = lanes_of(std::slice::from_ref(&ours));
        room.solve(&h, &s, true).unwrap();
        let expected = (
            bits(&lane(room.values(), 0)),
            bits(&lane(room.vectors(), 0)),
        );
        for place in 0..8 {
            let mut problems: Vec<Problem> = (0..8).map(|k| molecule_like(n, 50 + k)).collect();
            // Neighbours of every kind: degenerate, zero, singular, not finite.
            problems[(place + 1) % 8].h = vec![0.0; n * n];
            problems[(place + 2) % 8].s = vec![1.0; n * n];
            problems[(place + 3) % 8].h[0] = f64::NAN;
            problems[(place + 4) % 8].s[0] = -1.0;
            problems[place] = ours.clone();
            let (h, s) = lanes_of(&problems);
            let status = room.solve(&h, &s, true).unwrap();
            assert_eq!(status[place], LaneStatus::Solved);
            assert_eq!(
                bits(&lane(room.values(), place)),
                expected.0,
                "n {n} place {place}"
            );
            assert_eq!(
                bits(&lane(room.vectors(), place)),
                expected.1,
                "n {n} place {place}"
            );
        }
    }
}

#[test]
fn each_lane_reports_its_own_failure() {
    let n = 4;
    let mut problems: Vec<Problem> = (0..8).map(|k| molecule_like(n, k)).collect();
    problems[2].h[5] = f64::INFINITY;
    problems[4].s = vec![1.0; n * n];
    let (h, s) = lanes_of(&problems);
    let mut room = LaneWorkspace::new(n);
    let status = room.solve(&h, &s, true).unwrap();
    assert_eq!(
        status[2],
        LaneStatus::Failed(EigenError::NotFinite {
            matrix: "H",
            row: 1,
            column: 1
        })
    );
    assert!(matches!(
        &status[4],
        LaneStatus::Failed(EigenError::Singular { .. })
    ));
    assert_eq!(lane(room.values(), 4), [0.0; 4]);
    for l in [0, 1, 3, 5, 6, 7] {
        assert_eq!(status[l], LaneStatus::Solved);
        check(
            &problems[l],
            &lane(room.values(), l),
            &lane(room.vectors(), l),
            2.0,
        );
    }
}

#[test]
fn singular_overlap_names_the_functions() {
    // Functions 1 and 3 nearly the same.
    let n = 5;
    let mut p = molecule_like(n, 3);
    p.s = vec![0.0; n * n];
    for i in 0..n {
        p.s[i * n + i] = 1.0;
    }
    p.s[n + 3] = 1.0 - 1e-12;
    p.s[3 * n + 1] = 1.0 - 1e-12;
    let Err(EigenError::Singular {
        eigenvalue,
        weights,
    }) = solve(n, &p.h, &p.s)
    else {
        panic!("accepted");
    };
    assert!((eigenvalue - 1e-12).abs() < 1e-15);
    assert!((weights[1] - 0.5).abs() < 1e-6 && (weights[3] - 0.5).abs() < 1e-6);
    // Two functions with overlap −1.2: S is indefinite.
    p.s[n + 3] = -1.2;
    p.s[3 * n + 1] = -1.2;
    let Err(EigenError::Singular { eigenvalue, .. }) = solve(n, &p.h, &p.s) else {
        panic!("accepted");
    };
    assert!((eigenvalue + 0.2).abs() < 1e-14);
}

#[test]
fn bad_input_is_refused() {
    let p = molecule_like(3, 1);
    assert_eq!(
        solve(3, &p.h[1..], &p.s).unwrap_err(),
        EigenError::Size {
            matrix: "H",
            expected: 9,
            found: 8
        }
    );
    let mut s = p.s.clone();
    s[7] = f64::NAN;
    assert_eq!(
        solve(3, &p.h, &s).unwrap_err(),
        EigenError::NotFinite {
            matrix: "S",
            row: 2,
            column: 1
        }
    );
    let mut room = LaneWorkspace::new(3);
    assert!(matches!(
        room.solve(&[[0.0; 8]; 9], &[[0.0; 8]; 3], true),
        Err(EigenError::Size { matrix: "S", .. })
    ));
    assert_eq!(solve(0, &[], &[]).unwrap().values.len(), 0);
}
