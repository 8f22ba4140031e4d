//! Contour pictures of orbitals beside the labels.

use std::fmt::Write;

use contour::ContourBuilder;

use super::canvas::Canvas;
use super::sheet::Sheet;
use super::xml::length;

/// ψ on the contour, bohr^(−3/2).
const LEVEL: f64 = 0.05;

/// One orbital on a plane at one geometry.
#[derive(Clone, Debug, PartialEq)]
pub struct OrbitalPicture {
    /// The `id` of its line.
    pub line: u32,
    /// The plane in words.
    pub plane: String,
    /// Points along an edge of the lattice.
    pub points: usize,
    /// Half the edge, Å.
    pub half: f64,
    /// ψ in bohr^(−3/2), row by row from the top, each from the left.
    pub values: Vec<f64>,
    /// The nuclei seen from above: right and up from the middle, Å.
    pub nuclei: Vec<[f64; 2]>,
}

/// Pictures for both ends of a diagram.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct EndPictures {
    /// At the first point.
    pub start: Vec<OrbitalPicture>,
    /// At the last point.
    pub end: Vec<OrbitalPicture>,
}

impl OrbitalPicture {
    /// Outline of the region where `sign`·ψ is above the contour's value, in lattice steps from the
    /// upper left corner.
    pub(crate) fn outline(&self, sign: f64) -> Vec<Vec<(f64, f64)>> {
        let values: Vec<f64> = self.values.iter().map(|value| sign * value).collect();
        let builder = ContourBuilder::new(self.points, self.points, true);
        let Ok(found) = builder.contours(&values, &[LEVEL]) else {
            return Vec::new();
        };
        let mut rings = Vec::new();
        for polygon in found.iter().flat_map(|contour| &contour.geometry().0) {
            for ring in std::iter::once(polygon.exterior()).chain(polygon.interiors()) {
                // The library puts the first value half a step inside.
                rings.push(ring.0.iter().map(|at| (at.x - 0.5, at.y - 0.5)).collect());
            }
        }
        rings
    }
}

/// Draws a picture in a square: positive phase filled, negative phase open, nuclei as dots.
pub(crate) fn draw(
    canvas: &mut Canvas,
    sheet: &Sheet<'_>,
    picture: &OrbitalPicture,
    (x, y): (f64, f64),
    edge: f64,
    colour: &str,
) {
    let step = edge / (picture.points.max(2) - 1) as f64;
    canvas.xml.open("g", &[("class", "orbital")]);
    canvas
        .xml
        .text("title", &[], &format!("in {}", picture.plane));
    let width = 0.45 * sheet.measure.stroke;
    for sign in [1.0, -1.0] {
        let mut path = String::new();
        for ring in picture.outline(sign) {
            for (index, (across, down)) in ring.iter().enumerate() {
                let letter = if index == 0 { 'M' } else { 'L' };
                let _ = write!(
                    path,
                    "{letter}{} {}",
                    length(x + across * step),
                    length(y + down * step)
                );
            }
            path.push('Z');
        }
        if path.is_empty() {
            continue;
        }
        if sign > 0.0 {
            canvas.area(&path, colour);
        } else {
            canvas.stroke(&path, colour, width, &[]);
        }
    }
    let scale = 0.5 * edge / picture.half;
    for nucleus in &picture.nuclei {
        let at = (
            x + 0.5 * edge + nucleus[0] * scale,
            y + 0.5 * edge - nucleus[1] * scale,
        );
        canvas.disc(
            at,
            0.75 * sheet.measure.stroke,
            sheet.colours.ink,
            (sheet.colours.ground, 0.5 * width),
        );
    }
    canvas.xml.close();
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn contours_of_a_2p_orbital_lie_where_its_closed_form_says() {
        // ψ = (ζ⁵/π)^½ z e^(−ζr), ζ = 2.425 bohr⁻¹ (fluorine), in a plane that holds the z axis.
        let (points, half, zeta) = (81, 1.2, 2.425_f64);
        let bohr = 0.529_177_210_903;
        let psi = |x: f64, z: f64| {
            let (x, z) = (x / bohr, z / bohr);
            (zeta.powi(5) / std::f64::consts::PI).sqrt() * z * (-zeta * x.hypot(z)).exp()
        };
        let step = 2.0 * half / (points - 1) as f64;
        let place = |k: f64| k * step - half;
        let values = (0..points * points)
            .map(|k| psi(place((k % points) as f64), -place((k / points) as f64)))
            .collect();
        let picture = OrbitalPicture {
            line: 0,
            plane: String::new(),
            points,
            half,
            values,
            nuclei: vec![[0.0; 2]],
        };
        for sign in [1.0, -1.0] {
            let rings = picture.outline(sign);
            assert_eq!(rings.len(), 1);
            for &(across, down) in &rings[0] {
                let value = psi(place(across), -place(down));
                assert!(
                    (sign * value - LEVEL).abs() < 0.004,
                    "{across} {down}: {value}"
                );
            }
        }
    }
}
