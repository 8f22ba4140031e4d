//! The correlation diagram.

use crate::document::SweepDocument;
use crate::draw::wording::{charge, heading_formula, value_with_unit};
use crate::lettering::Lettering;

use super::canvas::{ASCENT, Anchor, Area, Canvas, DESCENT};
use super::gallery::Gallery;
use super::key::Mark;
use super::labels::{EndLabel, Side, end_labels, heights, widest};
use super::measure::Measure;
use super::options::{FigureError, FigureOptions, FigureWidth};
use super::scale::EnergyScale;
use super::sheet::Sheet;
use super::xml::{Writer, length};
use super::{axes, electrons, key, labels, metadata, panel, sum};

/// Font families: any sans-serif face that is there.
pub(crate) const FONTS: &str = "Helvetica, Arial, 'Liberation Sans', 'DejaVu Sans', sans-serif";

/// The orbital correlation (Walsh) diagram of a sweep as SVG 1.1 text (UTF-8, real text, no script,
/// no outside reference). Equal documents and options give equal bytes.
///
/// Lines are monotone cubics through the points (Fritsch and Carlson 1980); occupied ones wide, empty
/// ones thin; colour and dash pattern by irrep; labels at both ends in the group that holds there.
///
/// # Errors
/// A grid, fewer than two points, an unknown line, an empty window: see [`FigureError`].
pub fn sweep_figure(
    document: &SweepDocument,
    options: &FigureOptions,
) -> Result<String, FigureError> {
    compose(document, options).map(|canvas| canvas.xml.finish())
}

/// The figure with the record of its text.
pub(crate) fn compose(
    document: &SweepDocument,
    options: &FigureOptions,
) -> Result<Canvas, FigureError> {
    let mut sheet = Sheet::new(document, options)?;
    let measure = sheet.measure;
    let starts = end_labels(&sheet, Side::Left);
    let ends = end_labels(&sheet, Side::Right);

    // Downwards: heading, groups, main panel, sum, axis, key.
    let size = measure.label;
    let heading = Lettering::formula(
        heading_formula(&document.molecule),
        &charge(document.molecule.charge),
    );
    let titled = options.title && heading.width(measure.heading) < measure.page - 2.0 * measure.pad;
    let gallery = Gallery::new(&sheet, &starts, &ends);
    let gallery = gallery.as_ref();
    let crowd =
        |labels: &[EndLabel], side| -> f64 { heights(&sheet, labels, side, gallery).iter().sum() };
    let needed = crowd(&starts, Side::Left).max(crowd(&ends, Side::Right))
        + (ASCENT + DESCENT) * size
        - sheet.measure.label_distance();
    // The groups stand outside the curves, so that a short heading fits between them.
    let row = 1.6 * size;
    let shared = heading.width(measure.heading) < 0.4 * measure.page;
    let head = measure.pad
        + match (titled, shared) {
            (true, true) => row.max(1.75 * measure.heading),
            (true, false) => 1.5 * measure.heading + row,
            (false, _) => row,
        };
    sheet.top = head;
    sheet.bottom = head + measure.main.max(needed);

    // From left to right: axis, labels, curves, labels. The numbers on the axis do not depend on
    // where it stands.
    let split = 1.9 * measure.tick;
    sheet.scale = EnergyScale::new(&sheet.ranges, sheet.top, sheet.bottom, split);
    let ticks = sheet.scale.ticks(options.energy_unit, 1.9 * measure.tick);
    // The sum's numbers are at least as short as "−88.88".
    let numbers =
        axes::tick_width(&ticks, measure.tick).max(Lettering::plain("88.88").width(measure.tick));
    sheet.axis = axes::room(&measure, numbers);
    let group_width = |name: &str| Lettering::group(name).width(size);
    let groups = (
        document
            .points
            .first()
            .map(|p| p.point_group.as_str())
            .unwrap_or_default(),
        document
            .points
            .last()
            .map(|p| p.point_group.as_str())
            .unwrap_or_default(),
    );
    let left_width = widest(&starts, size).max(group_width(groups.0));
    let right_width = widest(&ends, size).max(group_width(groups.1));
    let pictures = |side| gallery.map_or(0.0, |all| all.width(&sheet, side));
    let left_width = left_width.max(widest(&starts, size) + pictures(Side::Left));
    let right_width = right_width.max(widest(&ends, size) + pictures(Side::Right));
    sheet.left = sheet.axis + 0.5 * size + left_width + measure.leader();
    sheet.right = measure.page - measure.pad - right_width - measure.leader();

    let mut canvas = Canvas::default();
    let sum_shown = sum::has_curve(&sheet);
    let sum_top = sheet.bottom + 2.0 * measure.tick;
    let lowest = if sum_shown {
        sum_top + measure.sum
    } else {
        sheet.bottom
    };
    draw_panels(
        &mut canvas,
        &sheet,
        &ticks,
        sum_shown.then_some((sum_top, lowest)),
    )?;
    labels::draw(&mut canvas, &sheet, &starts, Side::Left, gallery);
    labels::draw(&mut canvas, &sheet, &ends, Side::Right, gallery);
    let group_base = sheet.top - 0.75 * size;
    let beside = measure.leader();
    let soft = sheet.colours.soft;
    let (start, end) = (Lettering::group(groups.0), Lettering::group(groups.1));
    canvas.text(
        (sheet.left - beside, group_base),
        Anchor::End,
        size,
        soft,
        &start,
    );
    canvas.text(
        (sheet.right + beside, group_base),
        Anchor::Start,
        size,
        soft,
        &end,
    );
    if titled {
        let middle = (0.5 * (sheet.left + sheet.right))
            .min(measure.page - measure.pad - 0.5 * heading.width(measure.heading))
            .max(measure.pad + 0.5 * heading.width(measure.heading));
        let base = if shared {
            group_base
        } else {
            measure.pad + measure.heading
        };
        canvas.text(
            (middle, base),
            Anchor::Middle,
            measure.heading,
            sheet.colours.ink,
            &heading,
        );
    }
    let below = axes::coordinate_axis(&mut canvas, &sheet, lowest);
    let mut entries = std::mem::take(&mut canvas.key);
    entries.extend(gallery.map(Gallery::entries).into_iter().flatten());
    let below = if options.key {
        let span = (measure.pad, measure.page - measure.pad);
        key::draw(
            &mut canvas,
            (&measure, sheet.colours),
            &entries,
            span,
            below,
        )
    } else {
        below
    };
    let height = (below + measure.pad).max(measure.least_height);
    canvas.area = Some(Area {
        across: (sheet.left, sheet.right),
        down: (sheet.top, lowest),
        energies: sheet.scale.segments.clone(),
        lines: sheet.lines().map(|bundle| bundle.ids.clone()).collect(),
    });
    frame(canvas, &sheet, height)
}

/// Gap, lines, marks, axes and the sum.
fn draw_panels(
    canvas: &mut Canvas,
    sheet: &Sheet<'_>,
    ticks: &[crate::draw::ticks::Ticks],
    sum_panel: Option<(f64, f64)>,
) -> Result<(), FigureError> {
    let options = sheet.options;
    let clip = format!("url(#{}-window)", options.id_prefix);
    let mut uprights: Vec<(f64, f64)> = sheet
        .scale
        .segments
        .iter()
        .map(|segment| (segment.top, segment.bottom))
        .collect();
    uprights.extend(sum_panel);
    canvas.xml.open("g", &[("clip-path", &clip)]);
    let gap = options.gap && panel::shade_gap(canvas, sheet);
    canvas.xml.close();
    axes::poles(canvas, sheet, &uprights);
    if let Some((_, bottom)) = sum_panel {
        sum::guide(canvas, sheet, bottom);
    }
    canvas.xml.open("g", &[("clip-path", &clip)]);
    // Occupied lines lie on top.
    for occupied in [false, true] {
        for bundle in sheet
            .lines()
            .filter(|bundle| bundle.ever_occupied() == occupied)
        {
            panel::draw_line(canvas, sheet, bundle);
        }
    }
    canvas.xml.close();
    let marked = if options.crossings {
        panel::mark_crossings(canvas, sheet)
    } else {
        panel::Marked::default()
    };
    let electrons = electrons::draw(canvas, sheet, &marked.places)?;
    let title = format!("orbital energy / {}", options.energy_unit.symbol());
    let style = (&sheet.measure, sheet.colours);
    axes::energy_axis(
        canvas,
        style,
        (&sheet.scale, ticks),
        options.energy_unit,
        sheet.axis,
        &title,
    );
    if let Some((top, bottom)) = sum_panel {
        sum::draw(canvas, sheet, top, bottom);
    }
    let mut entry = |mark: Mark, words: &str| canvas.key.push((mark, words.to_owned()));
    if sheet.lines().any(|bundle| bundle.ever_occupied()) {
        entry(Mark::Occupied, "occupied");
        entry(Mark::Empty, "empty");
    }
    let unit = sheet
        .document
        .coordinates
        .first()
        .map(|coordinate| coordinate.unit);
    if let (Some(at), Some(unit)) = (electrons, unit) {
        entry(
            Mark::Electrons,
            &format!("electrons at {}", value_with_unit(at, unit)),
        );
    }
    if gap {
        entry(Mark::Gap, "HOMO–LUMO gap");
    }
    if marked.crossing {
        entry(Mark::Crossing, "crossing");
    }
    if marked.avoided {
        entry(Mark::Avoided, "avoided crossing");
    }
    if let Some(support) = options.support.as_ref().filter(|_| sum_panel.is_some()) {
        entry(Mark::Band, &support.words());
    }
    Ok(())
}

/// Puts the drawing into its frame: size, title, description, data, ground, clipping.
fn frame(canvas: Canvas, sheet: &Sheet<'_>, height: f64) -> Result<Canvas, FigureError> {
    let prefix = &sheet.options.id_prefix;
    let page = sheet.measure.page;
    let mut xml = open_page(sheet.options, page, height);
    xml.text(
        "title",
        &[("id", &format!("{prefix}-title"))],
        &metadata::title(sheet),
    );
    xml.text(
        "desc",
        &[("id", &format!("{prefix}-desc"))],
        &metadata::description(sheet),
    );
    xml.text("metadata", &[], &metadata::json(sheet)?);
    xml.open("defs", &[]);
    xml.open("clipPath", &[("id", &format!("{prefix}-window"))]);
    xml.empty(
        "rect",
        &[
            ("x", &length(sheet.left)),
            ("y", &length(sheet.top)),
            ("width", &length(sheet.right - sheet.left)),
            ("height", &length(sheet.bottom - sheet.top)),
        ],
    );
    xml.close();
    xml.close();
    xml.empty(
        "rect",
        &[
            ("width", "100%"),
            ("height", "100%"),
            ("fill", sheet.colours.ground),
        ],
    );
    xml.append(canvas.xml);
    Ok(Canvas {
        xml,
        height,
        boxes: canvas.boxes,
        area: canvas.area,
        key: Vec::new(),
    })
}

/// The root element with the page's size.
pub(crate) fn open_page(options: &FigureOptions, page: f64, height: f64) -> Writer {
    let prefix = &options.id_prefix;
    let (width_text, height_text) = match options.width {
        FigureWidth::Slide => (length(page), length(height)),
        _ => (
            Measure::in_millimetres(page),
            Measure::in_millimetres(height),
        ),
    };
    let mut xml = Writer::default();
    xml.open(
        "svg",
        &[
            ("xmlns", "http://www.w3.org/2000/svg"),
            ("width", &width_text),
            ("height", &height_text),
            (
                "viewBox",
                &format!("0 0 {} {}", length(page), length(height)),
            ),
            ("font-family", FONTS),
            ("role", "img"),
            ("aria-labelledby", &format!("{prefix}-title {prefix}-desc")),
        ],
    );
    xml
}
