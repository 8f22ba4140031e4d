//! Contour pictures of orbitals.

use std::fmt::Write;

use contour::ContourBuilder;

use super::canvas::{Canvas, TextBox};
use super::measure::Measure;
use super::sheet::Sheet;
use super::theme::Colours;
use super::xml::length;

/// ψ on the contour, bohr^(−3/2).
pub(crate) const LEVEL: f64 = 0.05;
/// Nuclei this close to a plane, in Å, lie in it.
const INSIDE: f64 = 0.1;

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
    /// The nuclei from the middle: right, up and out of the plane, Å.
    pub nuclei: Vec<[f64; 3]>,
    /// Nuclei joined by bonds, counted from 0.
    pub bonds: Vec<(usize, usize)>,
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
    /// Outline of the region where `sign`·ψ is above the contour's value, right and up from the
    /// middle, in Å.
    pub(crate) fn outline(&self, sign: f64) -> Vec<Vec<(f64, f64)>> {
        let values: Vec<f64> = self.values.iter().map(|value| sign * value).collect();
        let builder = ContourBuilder::new(self.points, self.points, true);
        let Ok(found) = builder.contours(&values, &[LEVEL]) else {
            return Vec::new();
        };
        let step = 2.0 * self.half / (self.points.max(2) - 1) as f64;
        // The library puts the first value half a step inside.
        let place = |k: f64| (k - 0.5) * step - self.half;
        let mut rings = Vec::new();
        for polygon in found.iter().flat_map(|contour| &contour.geometry().0) {
            for ring in std::iter::once(polygon.exterior()).chain(polygon.interiors()) {
                rings.push(
                    ring.0
                        .iter()
                        .map(|at| (place(at.x), -place(at.y)))
                        .collect(),
                );
            }
        }
        rings
    }
}

/// A picture as it will be drawn; lengths in Å from the middle of the molecule, right and up.
pub(crate) struct Shape {
    positive: Vec<Vec<(f64, f64)>>,
    negative: Vec<Vec<(f64, f64)>>,
    nuclei: Vec<[f64; 3]>,
    bonds: Vec<(usize, usize)>,
    /// Leftmost, rightmost, lowest and highest place.
    pub(crate) extent: [f64; 4],
    pub(crate) plane: String,
}

impl Shape {
    pub(crate) fn new(picture: &OrbitalPicture) -> Self {
        let (positive, negative) = (picture.outline(1.0), picture.outline(-1.0));
        let mut extent = [0.0_f64; 4];
        let mut hold = |x: f64, y: f64| {
            extent[0] = extent[0].min(x);
            extent[1] = extent[1].max(x);
            extent[2] = extent[2].min(y);
            extent[3] = extent[3].max(y);
        };
        for ring in positive.iter().chain(&negative) {
            ring.iter().for_each(|&(x, y)| hold(x, y));
        }
        for &[x, y, _] in &picture.nuclei {
            hold(x - 0.15, y - 0.15);
            hold(x + 0.15, y + 0.15);
        }
        Self {
            positive,
            negative,
            nuclei: picture.nuclei.clone(),
            bonds: picture.bonds.clone(),
            extent,
            plane: picture.plane.clone(),
        }
    }

    pub(crate) fn width(&self) -> f64 {
        self.extent[1] - self.extent[0]
    }

    pub(crate) fn height(&self) -> f64 {
        self.extent[3] - self.extent[2]
    }

    /// Whether a nucleus lies off the plane.
    pub(crate) fn has_outsiders(&self) -> bool {
        self.nuclei.iter().any(|at| at[2].abs() > INSIDE)
    }

    /// Draws the picture with its middle at a place on the page, `scale` points per Å: the positive
    /// phase filled, the negative one open; nuclei in the plane as full dots, others as open ones.
    pub(crate) fn draw(
        &self,
        canvas: &mut Canvas,
        sheet: &Sheet<'_>,
        (x, y): (f64, f64),
        scale: f64,
        colour: &str,
    ) {
        let (measure, colours) = (&sheet.measure, sheet.colours);
        let thin = 0.42 * measure.stroke;
        let on_page = |at: (f64, f64)| (x + at.0 * scale, y - at.1 * scale);
        let [left, right, low, high] = self.extent;
        let (corner, other) = (on_page((left, high)), on_page((right, low)));
        canvas.boxes.push(TextBox {
            left: corner.0,
            top: corner.1,
            right: other.0,
            bottom: other.1,
            text: "orbital".to_owned(),
        });
        canvas.xml.open("g", &[("class", "orbital")]);
        canvas
            .xml
            .text("title", &[], &format!("cut by {}", self.plane));
        let place = |atom: usize| on_page((self.nuclei[atom][0], self.nuclei[atom][1]));
        let mut bonds = String::new();
        for &(a, b) in &self.bonds {
            let (from, to) = (place(a), place(b));
            let _ = write!(
                bonds,
                "M{} {}L{} {}",
                length(from.0),
                length(from.1),
                length(to.0),
                length(to.1)
            );
        }
        if !bonds.is_empty() {
            canvas.stroke(&bonds, colours.soft, thin, &[]);
        }
        let paths = [&self.positive, &self.negative].map(|rings| {
            rings
                .iter()
                .map(|ring| smooth(&ring.iter().map(|at| on_page(*at)).collect::<Vec<_>>()))
                .collect::<String>()
        });
        let width = length(thin);
        for (path, opacity) in paths.iter().zip([colours.lobe, "0"]) {
            if !path.is_empty() {
                canvas.xml.empty(
                    "path",
                    &[
                        ("d", path),
                        ("fill", colour),
                        ("fill-opacity", opacity),
                        ("stroke", colour),
                        ("stroke-width", &width),
                        ("stroke-linejoin", "round"),
                    ],
                );
            }
        }
        for (atom, at) in self.nuclei.iter().enumerate() {
            let inside = at[2].abs() <= INSIDE;
            nucleus(canvas, measure, colours, place(atom), inside);
        }
        canvas.xml.close();
    }
}

/// A nucleus: full in the plane, open off it.
pub(crate) fn nucleus(
    canvas: &mut Canvas,
    measure: &Measure,
    colours: &Colours,
    at: (f64, f64),
    inside: bool,
) {
    let radius = 0.68 * measure.stroke;
    if inside {
        canvas.disc(
            at,
            radius,
            colours.ink,
            (colours.ground, 0.25 * measure.stroke),
        );
    } else {
        canvas.disc(
            at,
            0.85 * radius,
            colours.ground,
            (colours.ink, 0.3 * measure.stroke),
        );
    }
}

/// A closed path whose corners are rounded off: quadratic pieces from middle to middle of the edges.
fn smooth(ring: &[(f64, f64)]) -> String {
    // The last place repeats the first.
    let corners = &ring[..ring.len().saturating_sub(1)];
    let Some(&last) = corners.last() else {
        return String::new();
    };
    let middle = |a: (f64, f64), b: (f64, f64)| (0.5 * (a.0 + b.0), 0.5 * (a.1 + b.1));
    let start = middle(last, corners[0]);
    let mut path = format!("M{} {}", length(start.0), length(start.1));
    for (index, corner) in corners.iter().enumerate() {
        let next = corners[(index + 1) % corners.len()];
        let end = middle(*corner, next);
        let _ = write!(
            path,
            "Q{} {} {} {}",
            length(corner.0),
            length(corner.1),
            length(end.0),
            length(end.1)
        );
    }
    path.push('Z');
    path
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
        let place = |k: usize| k as f64 * step - half;
        let values = (0..points * points)
            .map(|k| psi(place(k % points), -place(k / points)))
            .collect();
        let picture = OrbitalPicture {
            line: 0,
            plane: String::new(),
            points,
            half,
            values,
            nuclei: vec![[0.0; 3]],
            bonds: Vec::new(),
        };
        for sign in [1.0, -1.0] {
            let rings = picture.outline(sign);
            assert_eq!(rings.len(), 1);
            for &(x, z) in &rings[0] {
                assert!(sign * z > 0.0, "{x} {z}");
                // How far the true contour is, Å.
                let slope = |a: (f64, f64), b: (f64, f64)| (psi(a.0, a.1) - psi(b.0, b.1)) / 2e-4;
                let (h, value) = (1e-4, psi(x, z));
                let gradient = slope((x + h, z), (x - h, z)).hypot(slope((x, z + h), (x, z - h)));
                let away = (sign * value - LEVEL).abs() / gradient;
                assert!(away < 0.002, "{x} {z}: {value}, {away} Å off");
            }
        }
        // The farthest place on the axis: r e^(−ζr) (ζ⁵/π)^½ = 0.05.
        let mut far = 2.0;
        for _ in 0..60 {
            far = ((zeta.powi(5) / std::f64::consts::PI).sqrt() * far / LEVEL).ln() / zeta;
        }
        let extent = Shape::new(&picture).extent;
        assert!((extent[3] - far * bohr).abs() < 0.01, "{extent:?} {far}");
        assert!((extent[2] + far * bohr).abs() < 0.01);
    }
}
