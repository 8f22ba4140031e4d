//! Runs one kernel at a time.
//!
//! - `probe count KERNEL REPETITIONS`: runs it that often and ends; for an instruction counter.
//! - `probe serve CASE THREADS`: for each line of standard input answers the seconds per point of
//!   one run; the line is `blocked` (the whole labelled sweep) or `unblocked` (geometry, overlap,
//!   Hamiltonian and the eigenvalues of the whole matrices, nothing labelled).
//! - `probe matrices CASE COUNT FILE`: writes n and the count (u64, little endian), then H and S of
//!   geometries along the path of the case.

mod cases;
mod kernels;
mod whole;

use std::error::Error;
use std::io::{BufRead, Write};
use std::time::Instant;

use cases::Case;

fn main() -> Result<(), Box<dyn Error>> {
    let words: Vec<String> = std::env::args().skip(1).collect();
    let words: Vec<&str> = words.iter().map(String::as_str).collect();
    match words.as_slice() {
        ["count", kernel, repetitions] => kernels::run(kernel, repetitions.parse()?),
        ["serve", case, threads] => serve(&Case::named(case)?, threads.parse()?),
        ["matrices", case, count, file] => {
            whole::write_matrices(&Case::named(case)?, count.parse()?, file)
        }
        _ => {
            Err("count KERNEL REPETITIONS, serve CASE THREADS, or matrices CASE COUNT FILE".into())
        }
    }
}

/// One run per line of standard input; the answer is the seconds per point.
fn serve(case: &Case, threads: usize) -> Result<(), Box<dyn Error>> {
    let pool = rayon::ThreadPoolBuilder::new()
        .num_threads(threads)
        .build()?;
    let points = case.plan()?.points();
    let mut out = std::io::stdout().lock();
    for line in std::io::stdin().lock().lines() {
        let plan = case.plan()?;
        let start = Instant::now();
        match line?.as_str() {
            "blocked" => {
                let sweep = pool.install(|| orbend_scan::Sweep::run(plan))?;
                std::hint::black_box(&sweep);
            }
            "unblocked" => {
                std::hint::black_box(whole::solve(&plan)?);
            }
            other => return Err(format!("{other}: blocked or unblocked").into()),
        }
        writeln!(out, "{:e}", start.elapsed().as_secs_f64() / points as f64)?;
        out.flush()?;
    }
    Ok(())
}
