//! Both kernels against an independent solver and against spectra known by construction.

#![allow(clippy::unwrap_used, clippy::panic)] // a failed expectation is the message

mod common;

use common::*;
use orbend_eigen::{EigenError, LARGE, LaneStatus, LaneWorkspace, solve};

fn check_everywhere(problems: &[Problem], exact: Option<&[f64]>, slack: f64) {
    let n = problems[0].n;
    let bound = |values: &[f64]| 1e-15 * n.max(4) as f64 * largest(values) * slack;
    let compare = |p: &Problem, values: &[f64], name: &str| {
        let expected = exact.map_or_else(|| reference_values(p), <[f64]>::to_vec);
        for (a, b) in values.iter().zip(&expected) {
            assert!(
                (a - b).abs() <= bound(&expected),
                "{name} n {n}: {a} {b} {:e}",
                a - b
            );
        }
    };
    for p in problems {
        let one = solve(n, &p.h, &p.s).unwrap();
        check(p, &one.values, &one.vectors, slack);
        compare(p, &one.values, "single");
    }
    let (h, s) = lanes_of(problems);
    let mut room = LaneWorkspace::new(n);
    let status = room.solve(&h, &s, true).unwrap();
    assert!(
        status.iter().all(|x| *x == LaneStatus::Solved),
        "{status:?}"
    );
    for (l, p) in problems.iter().enumerate() {
        let values = lane(room.values(), l);
        check(p, &values, &lane(room.vectors(), l), slack);
        compare(p, &values, "lanes");
    }
    room.solve(&h, &s, false).unwrap();
    for (l, p) in problems.iter().enumerate() {
        compare(p, &lane(room.values(), l), "values only");
    }
}

#[test]
fn molecules_of_every_size() {
    for n in (1..=34).chain([41, 60, 72]) {
        let problems: Vec<Problem> = (0..8)
            .map(|seed| molecule_like(n, 100 * n as u64 + seed))
            .collect();
        check_everywhere(&problems, None, 10.0);
    }
}

fn unit(n: usize) -> Vec<f64> {
    let mut s = vec![0.0; n * n];
    for i in 0..n {
        s[i * n + i] = 1.0;
    }
    s
}

/// Problems with S = 1 and a spectrum known by construction (to the rounding of the construction).
fn known(values: &[f64]) {
    let n = values.len();
    let mut sorted = values.to_vec();
    sorted.sort_by(f64::total_cmp);
    let problems: Vec<Problem> = (0..8)
        .map(|seed| Problem {
            n,
            h: with_spectrum(values, seed + 7),
            s: unit(n),
        })
        .collect();
    check_everywhere(&problems, Some(&sorted), 10.0);
}

#[test]
fn degenerate_spectra() {
    known(&[-1.0; 7]);
    known(&[0.0; 6]);
    known(&[-3.0, -3.0, -3.0, 2.0, 2.0, 5.0, 5.0, 5.0, 5.0, 5.0]);
    known(&(0..24).map(|k| f64::from(k / 6)).collect::<Vec<f64>>());
}

#[test]
fn clustered_spectra() {
    known(
        &(0..20)
            .map(|k| 1.0 + 1e-13 * f64::from(k))
            .collect::<Vec<f64>>(),
    );
    known(
        &(0..18)
            .map(|k| {
                if k < 9 {
                    1e-14 * f64::from(k)
                } else {
                    -2.0 - 1e-10 * f64::from(k)
                }
            })
            .collect::<Vec<f64>>(),
    );
}

#[test]
fn graded_spectra() {
    known(&(0..16).map(|k| 10f64.powi(-k)).collect::<Vec<f64>>());
    known(
        &(0..30)
            .map(|k| -(10f64.powi(-10 * k)))
            .collect::<Vec<f64>>(),
    );
    known(&[1.0, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0]);
}

#[test]
fn graded_matrices() {
    // Elements themselves graded, both ways up.
    for n in [5, 12, 21] {
        for up in [false, true] {
            let problems: Vec<Problem> = (0..8)
                .map(|seed| {
                    let mut numbers = Numbers::new(seed);
                    let mut h = vec![0.0; n * n];
                    for i in 0..n {
                        for j in 0..i + 1 {
                            let power = if up { 2 * (n - 1) - i - j } else { i + j };
                            let x = numbers.next() * 10f64.powi(-3 * power as i32);
                            h[i * n + j] = x;
                            h[j * n + i] = x;
                        }
                    }
                    Problem { n, h, s: unit(n) }
                })
                .collect();
            check_everywhere(&problems, None, 10.0);
        }
    }
}

#[test]
fn diagonal_and_zero() {
    let n = 9;
    let mut h = vec![0.0; n * n];
    check_everywhere(
        &[Problem {
            n,
            h: h.clone(),
            s: unit(n),
        }],
        None,
        1.0,
    );
    for i in 0..n {
        h[i * n + i] = 4.0 - i as f64;
    }
    check_everywhere(&[Problem { n, h, s: unit(n) }], None, 1.0);
}

#[test]
fn extreme_scales() {
    // Powers of two change no digit: energies scale exactly, coefficients too.
    let p = molecule_like(11, 5);
    let base = solve(11, &p.h, &p.s).unwrap();
    for (hs, ss) in [
        (2f64.powi(900), 1.0),
        (2f64.powi(-900), 1.0),
        (1.0, 2f64.powi(400)),
        (2f64.powi(300), 2f64.powi(-400)),
    ] {
        let q = Problem {
            n: 11,
            h: p.h.iter().map(|x| x * hs).collect(),
            s: p.s.iter().map(|x| x * ss).collect(),
        };
        let scaled = solve(11, &q.h, &q.s).unwrap();
        for (a, b) in base.values.iter().zip(&scaled.values) {
            assert_eq!((a * (hs / ss)).to_bits(), b.to_bits());
        }
        let (h, s) = lanes_of(&[q]);
        let mut room = LaneWorkspace::new(11);
        assert_eq!(room.solve(&h, &s, true).unwrap()[3], LaneStatus::Solved);
        for (a, b) in base.values.iter().zip(room.values()) {
            assert!((a * (hs / ss) - b[3]).abs() <= 1e-13 * b[3].abs());
        }
    }
}

#[test]
fn nearly_singular_overlap_within_the_limit() {
    // Condition 1e6: the accuracy that can be asked for is lower by that factor at most.
    for n in [4, 10, 17] {
        let problems: Vec<Problem> = (0..8)
            .map(|seed| {
                let mut spectrum: Vec<f64> = (0..n).map(|k| 0.5 + k as f64 / n as f64).collect();
                spectrum[0] = 1e-6;
                Problem {
                    n,
                    h: molecule_like(n, seed).h,
                    s: with_spectrum(&spectrum, seed + 50),
                }
            })
            .collect();
        let (h, s) = lanes_of(&problems);
        let mut room = LaneWorkspace::new(n);
        let status = room.solve(&h, &s, true).unwrap();
        for (l, p) in problems.iter().enumerate() {
            let one = solve(n, &p.h, &p.s).unwrap();
            assert!((one.smallest_overlap_eigenvalue - 1e-6).abs() < 1e-13);
            check(p, &one.values, &one.vectors, 1e4);
            assert_eq!(status[l], LaneStatus::Solved);
            check(p, &lane(room.values(), l), &lane(room.vectors(), l), 1e4);
        }
    }
}

#[test]
fn large_problems() {
    // Both sides of the switch to blocked kernels, and a size that is no multiple of their blocks.
    for n in [LARGE - 1, LARGE, LARGE + 47] {
        let p = molecule_like(n, 9);
        let one = solve(n, &p.h, &p.s).unwrap();
        check(&p, &one.values, &one.vectors, 10.0);
        let expected = reference_values(&p);
        let lowest = reference_values(&Problem {
            n,
            h: p.s.clone(),
            s: unit(n),
        })[0];
        assert!((one.smallest_overlap_eigenvalue - lowest).abs() < 1e-9 * lowest);
        for (a, b) in one.values.iter().zip(&expected) {
            assert!((a - b).abs() <= 1e-14 * n as f64 * largest(&expected));
        }
        let (h, s) = lanes_of(&[p]);
        let mut room = LaneWorkspace::new(n);
        let status = room.solve(&h, &s, true).unwrap();
        assert_eq!(status[7], LaneStatus::SolvedAlone);
        assert_eq!(lane(room.values(), 7), one.values);
        assert_eq!(lane(room.vectors(), 2), one.vectors);
    }
}

#[test]
fn large_degenerate_and_singular() {
    let n = LARGE + 10;
    let values: Vec<f64> = (0..n).map(|k| (k / 20) as f64 - 3.0).collect();
    let p = Problem {
        n,
        h: with_spectrum(&values, 3),
        s: unit(n),
    };
    let one = solve(n, &p.h, &p.s).unwrap();
    check(&p, &one.values, &one.vectors, 10.0);
    for (a, b) in one.values.iter().zip(&values) {
        assert!((a - b).abs() <= 1e-14 * n as f64 * largest(&values));
    }
    let mut spectrum = vec![1.0; n];
    spectrum[0] = 1e-11;
    let s = with_spectrum(&spectrum, 4);
    assert!(matches!(
        solve(n, &p.h, &s),
        Err(EigenError::Singular { .. })
    ));
}

#[test]
fn large_graded_clustered_and_nearly_singular() {
    // Clusters within rounding beside levels graded over 60 orders of magnitude.
    let n = LARGE + 7;
    let mut values: Vec<f64> = (0..n)
        .map(|k| match k {
            0..50 => -2.0 - 1e-13 * k as f64,
            50..100 => -(10f64.powi(50 - k as i32)),
            _ => 1.0 + 1e-9 * k as f64,
        })
        .collect();
    let p = Problem {
        n,
        h: with_spectrum(&values, 11),
        s: unit(n),
    };
    let one = solve(n, &p.h, &p.s).unwrap();
    check(&p, &one.values, &one.vectors, 10.0);
    values.sort_by(f64::total_cmp);
    for (a, b) in one.values.iter().zip(&values) {
        assert!((a - b).abs() <= 1e-14 * n as f64 * largest(&values));
    }
    // Condition 1e6, as for the small kernels.
    let mut spectrum: Vec<f64> = (0..n).map(|k| 0.5 + k as f64 / n as f64).collect();
    spectrum[0] = 1e-6;
    let p = Problem {
        n,
        h: molecule_like(n, 5).h,
        s: with_spectrum(&spectrum, 12),
    };
    let one = solve(n, &p.h, &p.s).unwrap();
    assert!((one.smallest_overlap_eigenvalue - 1e-6).abs() < 1e-12);
    check(&p, &one.values, &one.vectors, 1e4);
    // Nothing to reduce: diagonal H.
    let mut h = vec![0.0; n * n];
    for i in 0..n {
        h[i * n + i] = -(i as f64);
    }
    let p = Problem { n, h, s: unit(n) };
    let one = solve(n, &p.h, &p.s).unwrap();
    check(&p, &one.values, &one.vectors, 10.0);
}

#[test]
fn smallest_overlap_in_lanes() {
    for n in [1, 2, 6, 15, 40] {
        let problems: Vec<Problem> = (0..8).map(|seed| molecule_like(n, seed)).collect();
        let (h, s) = lanes_of(&problems);
        let mut room = LaneWorkspace::new(n);
        room.set_smallest_overlap(true);
        room.solve(&h, &s, true).unwrap();
        for (l, p) in problems.iter().enumerate() {
            let lowest = reference_values(&Problem {
                n,
                h: p.s.clone(),
                s: unit(n),
            })[0];
            let found = room.smallest_overlap_eigenvalues()[l];
            assert!(
                (found - lowest).abs() < 1e-14 * n as f64,
                "{found} {lowest}"
            );
        }
    }
    // All eigenvalues of S equal.
    let (h, s) = lanes_of(&[Problem {
        n: 5,
        h: vec![0.0; 25],
        s: unit(5),
    }]);
    let mut room = LaneWorkspace::new(5);
    room.set_smallest_overlap(true);
    room.solve(&h, &s, true).unwrap();
    assert!((room.smallest_overlap_eigenvalues()[0] - 1.0).abs() < 1e-15);
}
