//! The level ladder of one geometry.

use crate::document::{LevelRecord, LevelsDocument};
use crate::draw::nearest::nearest;
use crate::draw::spread::{room as label_room, spread};
use crate::draw::ticks::{ascii_number, number};
use crate::draw::wording::{bracketed_charge, charge, heading_formula};
use crate::lettering::Lettering;

use super::axes;
use super::canvas::{ASCENT, Anchor, Canvas, DESCENT};
use super::key::{self, Mark};
use super::measure::Measure;
use super::options::{FigureError, FigureOptions, Numbering};
use super::scale::{EnergyScale, automatic_window, check_window, ranges};
use super::sheet::irreps_in_order;
use super::sweep::open_page;
use super::theme::Colours;
use super::xml::length;

/// One level, or all levels of a degenerate set.
struct Rung {
    energy: f64,
    label: String,
    irrep: String,
    electrons: Vec<f64>,
}

impl Rung {
    fn occupied(&self) -> bool {
        self.electrons.iter().any(|electrons| *electrons > 1e-6)
    }
}

/// The levels of one geometry as an SVG ladder: sets side by side, each labelled with its energy.
/// `energies`, `lines` (here: labels), `theme`, `width` and the rest of the options work as for
/// [`sweep_figure`](super::sweep_figure); `crossings` and `sum_panel` have no meaning here.
///
/// # Errors
/// No levels, an unknown label, an empty window: see [`FigureError`].
pub fn levels_figure(
    document: &LevelsDocument,
    options: &FigureOptions,
) -> Result<String, FigureError> {
    compose(document, options).map(|canvas| canvas.xml.finish())
}

/// The figure with the record of its text.
pub(crate) fn compose(
    document: &LevelsDocument,
    options: &FigureOptions,
) -> Result<Canvas, FigureError> {
    document.check()?;
    let point = document.points.first().ok_or(FigureError::Nothing)?;
    let core = options.numbering == Numbering::Core;
    let rungs = choose(rungs(&point.levels, core), options)?;
    let colours = Colours::of(options.theme);
    let measure = Measure::of(options.width);
    let all_irreps = irreps_in_order(point.levels.iter().map(|level| level.irrep.as_str()));
    let colour = |rung: &Rung| {
        colours.irrep(
            all_irreps
                .iter()
                .position(|irrep| *irrep == rung.irrep)
                .unwrap_or_default(),
        )
    };

    let extents: Vec<(f64, f64, bool)> = rungs
        .iter()
        .map(|rung| (rung.energy, rung.energy, rung.occupied()))
        .collect();
    let automatic = automatic_window(&extents).ok_or(FigureError::Nothing)?;
    let window = options.energies.unwrap_or(automatic);
    if options.energies.is_some() {
        check_window(window, &extents)?;
    }
    let inside = |rung: &&Rung| window.0 <= rung.energy && rung.energy <= window.1;
    let shown: Vec<&Rung> = rungs.iter().filter(inside).collect();
    let parts = ranges(
        window,
        options.energies.is_none(),
        if options.axis_breaks { &extents } else { &[] },
    );

    let size = measure.label;
    let head = measure.pad
        + if options.title {
            1.5 * measure.heading
        } else {
            0.0
        }
        + 1.6 * size;
    let needed = label_room(shown.len(), measure.label_distance()) + (ASCENT + DESCENT) * size;
    let (top, bottom) = (head, head + measure.main.max(needed));
    let scale = EnergyScale::new(&parts, top, bottom, 1.9 * measure.tick);
    let ticks = scale.ticks(options.energy_unit, 1.9 * measure.tick);
    let axis = axes::room(&measure, axes::tick_width(&ticks, measure.tick));
    let energy_text = |rung: &Rung| {
        let unit = options.energy_unit;
        let decimals = if unit == super::EnergyUnit::Hartree {
            4
        } else {
            2
        };
        Lettering::plain(number(unit.of_ev(rung.energy), decimals))
    };
    let label_width = shown
        .iter()
        .map(|rung| Lettering::level(&rung.label).width(size))
        .fold(0.0, f64::max);
    let value_width = shown
        .iter()
        .map(|rung| energy_text(rung).width(measure.tick))
        .fold(0.0, f64::max);
    let values = measure.page - measure.pad;
    let labels = values - value_width - 0.8 * size - label_width;
    let (left, right) = (axis + size, labels - 2.2 * measure.leader());

    let mut canvas = Canvas::default();
    let gap = options.gap && shade(&mut canvas, &scale, &rungs, (left, right), colours);
    let style = (&measure, colours);
    let title = format!("orbital energy / {}", options.energy_unit.symbol());
    axes::energy_axis(
        &mut canvas,
        style,
        (&scale, &ticks),
        options.energy_unit,
        axis,
        &title,
    );

    let mut edges = draw_rungs(
        &mut canvas,
        &shown,
        &scale,
        &measure,
        colours,
        (left, right),
        &colour,
    );
    edges.reverse();
    let targets: Vec<f64> = shown
        .iter()
        .rev()
        .map(|rung| scale.y(rung.energy))
        .collect();
    let half = 0.5 * (ASCENT + DESCENT) * size;
    let places = spread(
        &targets,
        measure.label_distance(),
        top + half,
        bottom - half,
    );
    canvas.xml.open("g", &[("class", "labels")]);
    for (((rung, target), place), edge) in shown.iter().rev().zip(&targets).zip(&places).zip(&edges)
    {
        let (near, far) = (
            edge + 0.3 * measure.leader(),
            labels - 0.35 * measure.leader(),
        );
        let bend = labels - 1.2 * measure.leader();
        let path = format!(
            "M{} {}L{} {1}L{} {}",
            length(near),
            length(*target),
            length(bend.max(near)),
            length(far),
            length(*place)
        );
        canvas.stroke(&path, colours.soft, 0.25 * measure.stroke, &[]);
        let base = place + 0.34 * size;
        canvas.text(
            (labels, base),
            Anchor::Start,
            size,
            colour(rung),
            &Lettering::level(&rung.label),
        );
        canvas.text(
            (values, base),
            Anchor::End,
            measure.tick,
            colours.soft,
            &energy_text(rung),
        );
    }
    canvas.xml.close();

    let middle = 0.5 * (left + right);
    let group = Lettering::group(&point.point_group);
    canvas.text(
        (middle, top - 0.75 * size),
        Anchor::Middle,
        size,
        colours.soft,
        &group,
    );
    if options.title {
        let formula = heading_formula(&document.molecule);
        let heading = Lettering::formula(formula, &charge(document.molecule.charge));
        if heading.width(measure.heading) < measure.page - 2.0 * measure.pad {
            let at = (0.5 * measure.page, measure.pad + measure.heading);
            canvas.text(at, Anchor::Middle, measure.heading, colours.ink, &heading);
        }
    }
    let mut entries = vec![
        (Mark::Occupied, "occupied".to_owned()),
        (Mark::Empty, "empty".to_owned()),
    ];
    if gap {
        entries.push((Mark::Gap, "HOMO–LUMO gap".to_owned()));
    }
    let mut below = bottom + 0.5 * measure.tick;
    if options.key {
        let span = (measure.pad, measure.page - measure.pad);
        below = key::draw(&mut canvas, style, &entries, span, below);
    }
    frame(
        canvas,
        document,
        options,
        &shown,
        (below + measure.pad).max(measure.least_height),
    )
}

fn rungs(levels: &[LevelRecord], core: bool) -> Vec<Rung> {
    let mut found: Vec<Rung> = Vec::new();
    for level in levels {
        let label = if core {
            &level.full_label
        } else {
            &level.full_valence_label
        };
        let label = if label.is_empty() {
            &level.label
        } else {
            label
        };
        let electrons = level.occupation.get();
        let kin = found
            .iter_mut()
            .find(|rung| rung.label == *label && level.degeneracy > 1);
        match kin {
            Some(rung) => rung.electrons.push(electrons),
            None => found.push(Rung {
                energy: level.energy.get(),
                label: label.clone(),
                irrep: level.irrep.clone(),
                electrons: vec![electrons],
            }),
        }
    }
    found
}

fn choose(rungs: Vec<Rung>, options: &FigureOptions) -> Result<Vec<Rung>, FigureError> {
    if rungs.is_empty() {
        return Err(FigureError::Nothing);
    }
    let Some(names) = &options.lines else {
        return Ok(rungs);
    };
    let offered: Vec<String> = rungs.iter().map(|rung| rung.label.clone()).collect();
    if let Some(name) = names.iter().find(|name| !offered.contains(name)) {
        return Err(FigureError::UnknownLine {
            name: name.clone(),
            nearest: nearest(name, &offered),
        });
    }
    Ok(rungs
        .into_iter()
        .filter(|rung| names.contains(&rung.label))
        .collect())
}

fn shade(
    canvas: &mut Canvas,
    scale: &EnergyScale,
    rungs: &[Rung],
    (left, right): (f64, f64),
    colours: &Colours,
) -> bool {
    let homo = rungs
        .iter()
        .filter(|r| r.occupied())
        .map(|r| r.energy)
        .max_by(f64::total_cmp);
    let lumo = rungs
        .iter()
        .filter(|r| !r.occupied())
        .map(|r| r.energy)
        .min_by(f64::total_cmp);
    let (Some(homo), Some(lumo)) = (homo, lumo) else {
        return false;
    };
    if lumo <= homo || !(scale.shows(homo) && scale.shows(lumo)) {
        return false;
    }
    let path = format!(
        "M{} {}H{}V{}H{0}Z",
        length(left),
        length(scale.y(lumo)),
        length(right),
        length(scale.y(homo))
    );
    canvas.area(&path, colours.gap);
    true
}

/// Bars; those too close to be told apart share a row. Returns the right edge of each rung's row.
fn draw_rungs<'a>(
    canvas: &mut Canvas,
    shown: &[&'a Rung],
    scale: &EnergyScale,
    measure: &Measure,
    colours: &Colours,
    (left, right): (f64, f64),
    colour: &impl Fn(&Rung) -> &'static str,
) -> Vec<f64> {
    let mut rows: Vec<Vec<&'a Rung>> = Vec::new();
    for rung in shown {
        let near = |row: &Vec<&Rung>| {
            (scale.y(row[0].energy) - scale.y(rung.energy)).abs() < 2.6 * measure.stroke
        };
        match rows.last_mut().filter(|row| near(row)) {
            Some(row) => row.push(rung),
            None => rows.push(vec![rung]),
        }
    }
    let mut edges = Vec::new();
    canvas.xml.open("g", &[("class", "levels")]);
    for row in rows {
        let bars: Vec<(&Rung, f64)> = row
            .iter()
            .flat_map(|rung| rung.electrons.iter().map(move |e| (*rung, *e)))
            .collect();
        let slot = ((right - left) / bars.len() as f64).min(4.4 * measure.label);
        let start = 0.5 * (left + right) - 0.5 * slot * bars.len() as f64;
        edges.extend(
            row.iter()
                .map(|_| start + (bars.len() as f64 - 0.08) * slot),
        );
        for (k, (rung, electrons)) in bars.iter().enumerate() {
            let (from, to) = (
                start + (k as f64 + 0.08) * slot,
                start + (k as f64 + 0.92) * slot,
            );
            let y = scale.y(rung.energy);
            canvas.line(
                (from, y),
                (to, y),
                colour(rung),
                1.2 * measure.line_width(*electrons),
            );
            if *electrons > 1e-6 {
                let middle = (0.5 * (from + to), y);
                let radius = 1.15 * measure.stroke;
                canvas.electrons(middle, *electrons, radius, colour(rung), colours.ground);
            }
        }
    }
    canvas.xml.close();
    edges
}

fn frame(
    canvas: Canvas,
    document: &LevelsDocument,
    options: &FigureOptions,
    shown: &[&Rung],
    height: f64,
) -> Result<Canvas, FigureError> {
    let prefix = &options.id_prefix;
    let formula = format!(
        "{}{}",
        heading_formula(&document.molecule),
        bracketed_charge(document.molecule.charge)
    );
    let mut xml = open_page(options, Measure::of(options.width).page, height);
    let title = format!("Orbital levels of {formula}");
    xml.text("title", &[("id", &format!("{prefix}-title"))], &title);
    let mut words = "Orbital energies in eV with electrons:".to_owned();
    for rung in shown.iter().rev() {
        let electrons: f64 = rung.electrons.iter().sum();
        let energy = ascii_number(rung.energy, 2);
        words.push_str(&format!(" {} at {energy} ({electrons});", rung.label));
    }
    let words = format!("{}.", words.trim_end_matches(';'));
    xml.text("desc", &[("id", &format!("{prefix}-desc"))], &words);
    let data = serde_json::to_string(document)
        .map_err(|error| FigureError::Metadata(error.to_string()))?;
    xml.text("metadata", &[], &data);
    let ground = Colours::of(options.theme).ground;
    xml.empty(
        "rect",
        &[("width", "100%"), ("height", "100%"), ("fill", ground)],
    );
    xml.append(canvas.xml);
    Ok(Canvas {
        xml,
        height,
        boxes: canvas.boxes,
        area: None,
        key: Vec::new(),
    })
}
