//! The interaction diagram: the levels of two fragments at the sides, those of the molecule between,
//! joined where one is made of the other.

use crate::document::{FragmentsRecord, LevelsDocument};
use crate::draw::spread::{room as label_room, spread};
use crate::draw::ticks::ascii_number;
use crate::draw::wording::{charge, heading_formula};
use crate::lettering::Lettering;

use super::axes;
use super::canvas::{ASCENT, Anchor, Canvas, DESCENT};
use super::measure::Measure;
use super::options::{FigureError, FigureOptions, Numbering};
use super::scale::{EnergyScale, automatic_window, check_window, ranges};
use super::sweep::open_page;
use super::theme::Colours;
use super::xml::length;

/// A level joins an orbital that has at least this share in it.
const LEAST_SHARE: f64 = 0.15;

/// A level or set in one of the three columns.
struct Bar {
    energy: f64,
    label: String,
    degeneracy: u32,
    electrons: f64,
}

/// Where a column stands.
struct Column {
    bars: (f64, f64),
    label: f64,
    anchor: Anchor,
    /// Where lines to the left and to the right end.
    edges: (f64, f64),
}

/// The interaction diagram of a document with exactly two fragments, as SVG. Lines join a level of the
/// molecule to every fragment orbital with a share of 15 % or more; thicker for larger shares.
///
/// # Errors
/// No fragments, more than two, or an empty window: see [`FigureError`].
pub fn interaction_figure(
    document: &LevelsDocument,
    options: &FigureOptions,
) -> Result<String, FigureError> {
    document.check()?;
    let record = document.fragments.as_ref().ok_or(FigureError::Nothing)?;
    if record.fragments.len() != 2 {
        return Err(FigureError::NotTwoFragments {
            fragments: record.fragments.len(),
        });
    }
    let columns = [
        side(record, 0, options),
        molecule(record, options),
        side(record, 1, options),
    ];
    draw(document, record, &columns, options)
}

fn side(record: &FragmentsRecord, fragment: u32, options: &FigureOptions) -> Vec<Bar> {
    record
        .orbitals
        .iter()
        .filter(|orbital| orbital.fragment == fragment)
        .map(|orbital| Bar {
            energy: orbital.energy.get(),
            label: pick(&orbital.label, &orbital.valence_label, options),
            degeneracy: orbital.degeneracy,
            electrons: orbital.electrons.get(),
        })
        .collect()
}

fn molecule(record: &FragmentsRecord, options: &FigureOptions) -> Vec<Bar> {
    record
        .levels
        .iter()
        .map(|level| Bar {
            energy: level.energy.get(),
            label: pick(&level.label, &level.valence_label, options),
            degeneracy: level.degeneracy,
            electrons: level.electrons.get(),
        })
        .collect()
}

fn pick(core: &str, valence: &str, options: &FigureOptions) -> String {
    match options.numbering {
        Numbering::Core => core,
        Numbering::Valence => valence,
    }
    .to_owned()
}

fn draw(
    document: &LevelsDocument,
    record: &FragmentsRecord,
    columns: &[Vec<Bar>; 3],
    options: &FigureOptions,
) -> Result<String, FigureError> {
    let measure = Measure::of(options.width);
    let colours = Colours::of(options.theme);
    let extents: Vec<(f64, f64, bool)> = columns
        .iter()
        .flatten()
        .map(|bar| (bar.energy, bar.energy, bar.electrons > 1e-6))
        .collect();
    let automatic = automatic_window(&extents).ok_or(FigureError::Nothing)?;
    let window = options.energies.unwrap_or(automatic);
    if options.energies.is_some() {
        check_window(window, &extents)?;
    }
    let parts = ranges(window, options.energies.is_none(), &extents);
    let size = measure.label;
    let most = columns
        .iter()
        .map(|column| column.iter().filter(|bar| inside(window, bar)).count())
        .max()
        .unwrap_or(0);
    let heading = if options.title {
        1.6 * measure.heading
    } else {
        0.0
    };
    let top = measure.pad + heading + 2.0 * size;
    let needed = label_room(most, measure.label_distance()) + (ASCENT + DESCENT) * size;
    let bottom = top + measure.main.max(needed);
    let scale = EnergyScale::new(&parts, top, bottom, 1.9 * measure.tick);
    let ticks = scale.ticks(options.energy_unit, 1.9 * measure.tick);
    let axis = axes::room(&measure, axes::tick_width(&ticks, measure.tick));
    let mut canvas = Canvas::default();
    let title = format!("orbital energy / {}", options.energy_unit.symbol());
    axes::energy_axis(
        &mut canvas,
        (&measure, colours),
        (&scale, &ticks),
        options.energy_unit,
        axis,
        &title,
    );
    let places = places(columns, &measure, axis);
    join(
        &mut canvas,
        record,
        columns,
        &places,
        &scale,
        window,
        colours,
        &measure,
    );
    for (place, (column, bars)) in places.iter().zip(columns).enumerate() {
        let colour = [colours.irrep(0), colours.ink, colours.irrep(1)][place];
        let shown: Vec<&Bar> = bars.iter().filter(|bar| inside(window, bar)).collect();
        draw_column(
            &mut canvas,
            column,
            &shown,
            &scale,
            (top, bottom),
            colour,
            colours,
            &measure,
        );
        let words = match place {
            1 => Lettering::formula(
                heading_formula(&document.molecule),
                &charge(document.molecule.charge),
            ),
            _ => {
                let fragment = &record.fragments[place / 2];
                Lettering::formula(&fragment.formula, &charge(fragment.charge))
            }
        };
        let middle = 0.5 * (column.bars.0 + column.bars.1);
        canvas.text(
            (middle, top - 0.8 * size),
            Anchor::Middle,
            size,
            colour,
            &words,
        );
    }
    finish(
        canvas,
        document,
        record,
        options,
        bottom + measure.pad + size,
    )
}

fn inside(window: (f64, f64), bar: &Bar) -> bool {
    window.0 <= bar.energy && bar.energy <= window.1
}

/// Three columns: labels outside at the sides, right of the bars in the middle.
fn places(columns: &[Vec<Bar>; 3], measure: &Measure, axis: f64) -> [Column; 3] {
    let size = measure.label;
    let width = |bars: &[Bar]| {
        bars.iter()
            .map(|bar| Lettering::level(&bar.label).width(size))
            .fold(0.0, f64::max)
    };
    let gap = 0.9 * size;
    let left = axis + 0.8 * size;
    let right = measure.page - measure.pad;
    let bar = 0.13 * (right - left);
    let (w0, w1, w2) = (width(&columns[0]), width(&columns[1]), width(&columns[2]));
    let a = left + w0 + gap;
    let c = right - w2 - gap - bar;
    let middle = 0.5 * (a + bar + c) - 0.5 * (bar + gap + w1);
    [
        Column {
            bars: (a, a + bar),
            label: left + w0,
            anchor: Anchor::End,
            edges: (a, a + bar),
        },
        Column {
            bars: (middle, middle + bar),
            label: middle + bar + gap,
            anchor: Anchor::Start,
            edges: (middle, middle + bar + gap + w1 + 0.2 * size),
        },
        Column {
            bars: (c, c + bar),
            label: c + bar + gap,
            anchor: Anchor::Start,
            edges: (c, c + bar),
        },
    ]
}

#[allow(
    clippy::too_many_arguments,
    reason = "everything that lines are drawn from"
)]
fn join(
    canvas: &mut Canvas,
    record: &FragmentsRecord,
    columns: &[Vec<Bar>; 3],
    places: &[Column; 3],
    scale: &EnergyScale,
    window: (f64, f64),
    colours: &Colours,
    measure: &Measure,
) {
    let left = columns[0].len();
    canvas.xml.open("g", &[("class", "made-of")]);
    for (level, bar) in record.levels.iter().zip(&columns[1]) {
        for (index, share) in level.shares.iter().enumerate() {
            let share = share.get();
            let (place, partner) = if index < left {
                (0, &columns[0][index])
            } else {
                (2, &columns[2][index - left])
            };
            if share < LEAST_SHARE || !inside(window, bar) || !inside(window, partner) {
                continue;
            }
            let (y1, y2) = (scale.y(partner.energy), scale.y(bar.energy));
            let (from, to) = if place == 0 {
                (places[0].edges.1, places[1].edges.0)
            } else {
                (places[2].edges.0, places[1].edges.1)
            };
            let path = format!(
                "M{} {}L{} {}",
                length(from),
                length(y1),
                length(to),
                length(y2)
            );
            let stroke = measure.stroke * (0.25 + 0.75 * share.min(1.0));
            canvas.stroke(&path, colours.soft, stroke, &[2.4 * stroke, 1.4 * stroke]);
        }
    }
    canvas.xml.close();
}

#[allow(
    clippy::too_many_arguments,
    reason = "one column with its place and style"
)]
fn draw_column(
    canvas: &mut Canvas,
    column: &Column,
    shown: &[&Bar],
    scale: &EnergyScale,
    (top, bottom): (f64, f64),
    colour: &str,
    colours: &Colours,
    measure: &Measure,
) {
    let size = measure.label;
    canvas.xml.open("g", &[("class", "levels")]);
    for bar in shown {
        let count = f64::from(bar.degeneracy.max(1));
        let slot = (column.bars.1 - column.bars.0) / count;
        let y = scale.y(bar.energy);
        let each = bar.electrons / count;
        for k in 0..bar.degeneracy.max(1) {
            let from = column.bars.0 + (f64::from(k) + 0.06) * slot;
            let to = column.bars.0 + (f64::from(k) + 0.94) * slot;
            canvas.line((from, y), (to, y), colour, 1.2 * measure.line_width(each));
            if each > 1e-6 {
                let middle = (0.5 * (from + to), y);
                canvas.electrons(middle, each, 1.05 * measure.stroke, colour, colours.ground);
            }
        }
    }
    canvas.xml.close();
    let mut order: Vec<&Bar> = shown.to_vec();
    order.sort_by(|a, b| b.energy.total_cmp(&a.energy));
    let targets: Vec<f64> = order.iter().map(|bar| scale.y(bar.energy)).collect();
    let half = 0.5 * (ASCENT + DESCENT) * size;
    let spots = spread(
        &targets,
        measure.label_distance(),
        top + half,
        bottom - half,
    );
    canvas.xml.open("g", &[("class", "labels")]);
    for ((bar, target), spot) in order.iter().zip(&targets).zip(&spots) {
        let (near, far) = match column.anchor {
            Anchor::End => (column.bars.0 - 0.1 * size, column.label + 0.25 * size),
            _ => (column.bars.1 + 0.1 * size, column.label - 0.25 * size),
        };
        if (target - spot).abs() > 0.3 * size {
            canvas.line(
                (near, *target),
                (far, *spot),
                colours.soft,
                0.25 * measure.stroke,
            );
        }
        canvas.text(
            (column.label, spot + 0.34 * size),
            column.anchor,
            size,
            colour,
            &Lettering::level(&bar.label),
        );
    }
    canvas.xml.close();
}

fn finish(
    mut canvas: Canvas,
    document: &LevelsDocument,
    record: &FragmentsRecord,
    options: &FigureOptions,
    height: f64,
) -> Result<String, FigureError> {
    let measure = Measure::of(options.width);
    let colours = Colours::of(options.theme);
    let prefix = &options.id_prefix;
    let formula = heading_formula(&document.molecule);
    let fragments: Vec<&str> = record
        .fragments
        .iter()
        .map(|fragment| fragment.formula.as_str())
        .collect();
    if options.title {
        let words = format!("{} of {formula}", fragments.join(" and "));
        let heading = Lettering::plain(words);
        if heading.width(measure.heading) < measure.page - 2.0 * measure.pad {
            let at = (0.5 * measure.page, measure.pad + measure.heading);
            canvas.text(at, Anchor::Middle, measure.heading, colours.ink, &heading);
        }
    }
    let mut xml = open_page(options, measure.page, height.max(measure.least_height));
    let title = format!("Interaction of {} in {formula}", fragments.join(" and "));
    xml.text("title", &[("id", &format!("{prefix}-title"))], &title);
    let words: Vec<String> = record
        .levels
        .iter()
        .rev()
        .map(|level| {
            let energy = ascii_number(level.energy.get(), 2);
            format!("{} at {energy} eV", level.label)
        })
        .collect();
    let words = format!(
        "Levels of the molecule: {}. A line joins a level to each fragment orbital with a share of 15 % or more.",
        words.join("; ")
    );
    xml.text("desc", &[("id", &format!("{prefix}-desc"))], &words);
    let data =
        serde_json::to_string(record).map_err(|error| FigureError::Metadata(error.to_string()))?;
    xml.text("metadata", &[], &data);
    xml.empty(
        "rect",
        &[
            ("width", "100%"),
            ("height", "100%"),
            ("fill", colours.ground),
        ],
    );
    xml.append(canvas.xml);
    Ok(xml.finish())
}
