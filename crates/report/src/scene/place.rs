//! Where things stand in the scene.

use super::SurfaceRecord;

/// The matrix (column by column) that turns the frame of the positions so that the group's y axis
/// points right, z up and x towards the reader, and shifts to the right by so many Å.
pub(super) fn frame_matrix(axes: [[f64; 3]; 3], shift: f64) -> [f64; 16] {
    let [x, y, z] = axes;
    let rows = [y, z, x];
    core::array::from_fn(|k| {
        let (column, row) = (k / 4, k % 4);
        match (column, row) {
            (3, 0) => shift,
            (3, 3) => 1.0,
            (3, _) | (_, 3) => 0.0,
            _ => rows[row][column] + 0.0,
        }
    })
}

/// The matrix of a body of height 1 along z that shall reach from one place to another, its cross
/// section scaled by `thickness`.
pub(super) fn between(from: [f64; 3], to: [f64; 3], thickness: f64) -> [f64; 16] {
    let along: [f64; 3] = core::array::from_fn(|k| to[k] - from[k]);
    let length = dot(along, along).sqrt();
    let z = along.map(|c| c / length);
    // Any direction across will do: away from the largest component.
    let smallest = (0..3).fold(0, |a, b| if z[b].abs() < z[a].abs() { b } else { a });
    let helper: [f64; 3] = core::array::from_fn(|k| f64::from(u8::from(k == smallest)));
    let across = cross(helper, z);
    let size = dot(across, across).sqrt();
    let x = across.map(|c| c / size);
    let y = cross(z, x);
    let columns = [
        x.map(|c| c * thickness),
        y.map(|c| c * thickness),
        along,
        from,
    ];
    core::array::from_fn(|k| match (k / 4, k % 4) {
        (3, 3) => 1.0,
        (_, 3) => 0.0,
        (column, row) => columns[column][row] + 0.0,
    })
}

/// How far a surface and the nuclei reach to the left and to the right, Å.
pub(super) fn span(surface: &SurfaceRecord, positions: &[[f64; 3]]) -> (f64, f64) {
    let right = surface.axes[1];
    surface
        .phases
        .iter()
        .flat_map(|phase| &phase.vertices)
        .chain(positions)
        .map(|&at| dot(at, right))
        .fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), at| {
            (low.min(at), high.max(at))
        })
}

fn dot(a: [f64; 3], b: [f64; 3]) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

fn cross(a: [f64; 3], b: [f64; 3]) -> [f64; 3] {
    [
        a[1] * b[2] - a[2] * b[1],
        a[2] * b[0] - a[0] * b[2],
        a[0] * b[1] - a[1] * b[0],
    ]
}
