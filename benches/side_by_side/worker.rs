//! Times this project's kernels on problems read from a file, one round per line of stdin, so that
//! `compare.py` can alternate them with others in one run.
//!
//! Usage: `side_by_side FILE CHUNK`; the file holds n and the count (u64, little endian), then H and
//! S of each problem. Each line of stdin names a kernel; the answer is the seconds of each chunk.

#![allow(clippy::print_stdout)] // a program, not a library

use std::error::Error;
use std::io::{BufRead, Write};
use std::time::Instant;

use orbend_eigen::{LANES, LaneStatus, LaneWorkspace, Lanes, Workspace, solve, solve_into};

fn main() -> Result<(), Box<dyn Error>> {
    let path = std::env::args()
        .nth(1)
        .ok_or("a file of problems is needed")?;
    let chunk: usize = std::env::args()
        .nth(2)
        .ok_or("the size of a chunk is needed")?
        .parse()?;
    let bytes = std::fs::read(path)?;
    let (words, _) = bytes.as_chunks::<8>();
    let n = u64::from_le_bytes(words[0]) as usize;
    let count = u64::from_le_bytes(words[1]) as usize;
    let numbers: Vec<f64> = words[2..].iter().map(|x| f64::from_le_bytes(*x)).collect();
    let size = n * n;
    let problems: Vec<(&[f64], &[f64])> = numbers
        .chunks_exact(2 * size)
        .map(|two| two.split_at(size))
        .collect();
    if problems.len() != count {
        return Err("the file is too short".into());
    }
    let packed: Vec<(Vec<Lanes>, Vec<Lanes>)> = problems
        .chunks_exact(LANES)
        .map(|eight| {
            let pack = |pick: &dyn Fn(usize, usize) -> f64| -> Vec<Lanes> {
                (0..size)
                    .map(|i| core::array::from_fn(|lane| pick(lane, i)))
                    .collect()
            };
            (
                pack(&|lane, i| eight[lane].0[i]),
                pack(&|lane, i| eight[lane].1[i]),
            )
        })
        .collect();
    let mut lanes = LaneWorkspace::new(n);
    let mut alone = Workspace::new(n);
    let mut out = std::io::stdout().lock();
    for line in std::io::stdin().lock().lines() {
        let line = line?;
        let mut seconds = Vec::new();
        for part in 0..count / chunk {
            let problems = &problems[part * chunk..(part + 1) * chunk];
            let (start, start_processor) = (Instant::now(), processor_seconds());
            match line.as_str() {
                "lanes" | "lanes-overlap" | "lanes-values" => {
                    lanes.set_smallest_overlap(line == "lanes-overlap");
                    for (h, s) in &packed[part * chunk / LANES..(part + 1) * chunk / LANES] {
                        let status = lanes.solve(h, s, line != "lanes-values")?;
                        if status.iter().any(|x| matches!(x, LaneStatus::Failed(_))) {
                            return Err("a lane failed".into());
                        }
                    }
                }
                "single" | "single-overlap" => {
                    alone.set_smallest_overlap(line == "single-overlap");
                    for (h, s) in problems {
                        solve_into(&mut alone, h, s)?;
                    }
                }
                "checked" => {
                    for (h, s) in problems {
                        solve(n, h, s)?;
                    }
                }
                other => return Err(format!("unknown kernel {other}").into()),
            }
            let elapsed = start.elapsed().as_secs_f64();
            // The processor clock ticks coarsely: it is for long chunks.
            let used = match (start_processor, processor_seconds()) {
                (Some(from), Some(to)) if elapsed > 0.02 => to - from,
                _ => elapsed,
            };
            seconds.push(format!("{used:e}"));
        }
        writeln!(out, "{}", seconds.join(" "))?;
        out.flush()?;
    }
    Ok(())
}

/// Processor time of this thread, where the system tells it.
fn processor_seconds() -> Option<f64> {
    let text = std::fs::read_to_string("/proc/thread-self/schedstat").ok()?;
    Some(1e-9 * text.split(' ').next()?.parse::<f64>().ok()?)
}
