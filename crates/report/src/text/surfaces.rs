//! What the surfaces of a `.glb` file are, as text.

use super::TextOptions;
use crate::draw::ticks::ascii_number;
use crate::scene::SurfaceRecord;

/// One sentence for each surface: its isovalue, share and volumes. Every line fits the width.
#[must_use]
pub fn surfaces_text(surfaces: &[SurfaceRecord], options: &TextOptions) -> String {
    let mut out = String::new();
    for surface in surfaces {
        let [positive, negative] = &surface.phases;
        let volumes = if negative.triangles.is_empty() {
            format!("volume {} Å^3", ascii_number(positive.volume, 2))
        } else {
            format!(
                "volumes {} and {} Å^3",
                ascii_number(positive.volume, 2),
                ascii_number(negative.volume, 2)
            )
        };
        options.paragraph(
            &mut out,
            &format!(
                "surface of {}: psi = +/-{} bohr^(-3/2) encloses {} % of the density; {volumes}",
                surface.display,
                ascii_number(surface.isovalue, 4),
                ascii_number(100.0 * surface.share, 1),
            ),
        );
    }
    out
}
