const SVG = 'http://www.w3.org/2000/svg';
function drawn(name, attributes, parent) {
  const made = document.createElementNS(SVG, name);
  for (const [key, value] of Object.entries(attributes)) made.setAttribute(key, value);
  if (parent) parent.append(made);
  return made;
}

const round = (value) => String(Math.round(value * 100) / 100);
// Only what changes is written.
function set(node, name, value) { if (node.getAttribute(name) !== value) node.setAttribute(name, value); }
function put(node, text) { if (node.textContent !== text) node.textContent = text; }

// One drawing of the diagram with its cursor. `book` holds the data and their words; `hands` what
// happens when a line is pointed at or pressed, or the diagram dragged.
function makeStage(holder, area, book, hands) {
  const { data, byId, labelOf } = book, count = data.at.length;
  const svg = holder.querySelector('svg'), box = svg.viewBox.baseVal;
  const bundles = area.lines.map((ids) => ids.map((id) => byId.get(id))).filter((lines) => lines[0]);
  svg.setAttribute('role', 'group');
  const across = (point) => area.across[0] + (data.at[point] - data.at[0]) / (data.at[count - 1] - data.at[0]) * (area.across[1] - area.across[0]);
  function height(energy) {
    let below = null;
    for (const [low, high, bottom, top] of area.energies) {
      if (energy <= high) {
        if (below && energy < low) return below[3] + (energy - below[1]) / (low - below[1]) * (bottom - below[3]);
        return bottom - (energy - low) / (high - low) * (bottom - top);
      }
      below = [low, high, bottom, top];
    }
    const [low, high, bottom, top] = below;
    return bottom - (energy - low) / (high - low) * (bottom - top);
  }
  const shown = (energy) => energy !== null && energy >= area.energies[0][0] && energy <= area.energies[area.energies.length - 1][1];

  const groups = new Map();
  for (const g of svg.querySelectorAll('g.line')) {
    const ids = g.dataset.line.split(' ').map(Number), line = byId.get(ids[0]);
    if (!line) continue;
    for (const id of ids) groups.set(id, g);
    g.querySelector('title').remove();
    g.setAttribute('tabindex', '0');
    g.setAttribute('role', 'button');
    g.setAttribute('aria-pressed', 'false');
    g.setAttribute('aria-label', `Line ${labelOf(line)}`);
    for (const path of [...g.querySelectorAll('path')]) {
      const wide = path.cloneNode();
      wide.removeAttribute('stroke-dasharray');
      wide.setAttribute('class', 'reach');
      g.append(wide);
    }
    hands.listen(g, line.id);
    hands.listenToKeys(g, line.id);
  }
  const sets = [...new Set(groups.values())];
  const colours = new Map([...groups].map(([id, g]) => [id, g.querySelector('path').getAttribute('stroke')]));
  const colourOf = (id) => colours.get(id) || '#656d76';

  const cursor = drawn('g', { class: 'cursor' }, svg);
  const cursorLine = drawn('path', { d: `M0 ${area.down[0]}V${area.down[1]}` }, cursor);
  const dots = bundles.map((lines) => drawn('circle', { r: 2.2, fill: colourOf(lines[0].id) }, cursor));

  // Dragging anywhere on the diagram moves along the path.
  let dragging = false, startX = 0;
  svg.addEventListener('pointerdown', (event) => { dragging = true; startX = event.clientX; });
  svg.addEventListener('pointermove', (event) => {
    if (!dragging) return;
    if (Math.abs(event.clientX - startX) > 4) hands.dragged = true;
    if (!hands.dragged) return;
    const r = svg.getBoundingClientRect(), x = (event.clientX - r.left) / r.width * box.width;
    const share = Math.max(0, Math.min(1, (x - area.across[0]) / (area.across[1] - area.across[0])));
    hands.moveTo(data.at[0] + share * (data.at[count - 1] - data.at[0]));
  });
  window.addEventListener('pointerup', () => { dragging = false; });

  function show(point, active, pinned) {
    const x = across(point), marked = active === null ? null : groups.get(active);
    set(cursorLine, 'transform', `translate(${round(x)} 0)`);
    bundles.forEach((lines, k) => {
      const energy = lines[0].energies[point];
      set(dots[k], 'visibility', shown(energy) ? 'visible' : 'hidden');
      if (shown(energy)) { set(dots[k], 'cx', round(x)); set(dots[k], 'cy', round(height(energy))); }
    });
    svg.classList.toggle('chosen', Boolean(marked));
    for (const g of sets) {
      g.classList.toggle('on', g === marked);
      set(g, 'aria-pressed', String(pinned !== null && g === groups.get(pinned)));
    }
  }
  return { area, box, bundles, height, shown, colourOf, show };
}

// The levels of a point as rungs on the scale of a stage, with their electrons and labels. Made once;
// `show` moves what is there, which costs a browser far less than new elements.
const LADDER_WIDTH = 150;
function makeLadder(holder, stage, { titleAt, labelAt, energyText, listen }) {
  const { area, box, bundles, height, shown, colourOf } = stage;
  const svg = drawn('svg', { viewBox: `0 0 ${LADDER_WIDTH} ${box.height}` }, holder);
  const title = drawn('text', { x: 14, y: area.down[0] - 8, class: 'where' }, svg);
  const rungs = bundles.map((set) => {
    const colour = colourOf(set[0].id), g = drawn('g', { class: 'rung' }, svg);
    const members = set.map((line) => ({
      line,
      bar: drawn('path', { stroke: colour, 'stroke-width': 1.6 }, g),
      electrons: [0, 1].map(() => drawn('circle', { stroke: colour, 'stroke-width': 0.6 }, g)),
    }));
    const rung = {
      set, g, colour, members,
      leader: drawn('path', { stroke: '#656d76', 'stroke-width': 0.5, fill: 'none' }, g),
      label: drawn('text', { x: 77, fill: colour }, g),
      value: drawn('text', { x: LADDER_WIDTH - 3, class: 'value' }, g),
      reach: drawn('rect', { x: 8, width: LADDER_WIDTH - 8, class: 'reach' }, g),
    };
    listen(g, set[0].id);
    return rung;
  });
  function show(point, active) {
    put(title, titleAt(point));
    const rows = rungs.filter((rung) => shown(rung.set[0].energies[point]));
    for (const rung of rungs) set(rung.g, 'visibility', 'hidden');
    for (const row of rows) { row.y = row.place = height(row.set[0].energies[point]); set(row.g, 'visibility', 'visible'); }
    rows.sort((a, b) => a.y - b.y);
    // Labels keep their distance: pushed down, then up from the bottom.
    const gap = 11.5, floor = Math.max(area.energies[0][2], area.down[0] + gap * rows.length);
    rows.forEach((row, k) => { if (k) row.place = Math.max(row.place, rows[k - 1].place + gap); });
    for (let k = rows.length - 1, limit = floor; k >= 0; k--) { rows[k].place = Math.min(rows[k].place, limit); limit = rows[k].place - gap; }
    // Rungs that would lie on each other share the width.
    for (let from = 0; from < rows.length;) {
      let to = from + 1;
      while (to < rows.length && rows[to].y - rows[to - 1].y < 4) to += 1;
      const members = rows.slice(from, to).reduce((sum, row) => sum + row.set.length, 0);
      let column = 0;
      for (const row of rows.slice(from, to)) { row.column = column; row.width = 50 / members; column += row.set.length; }
      from = to;
    }
    for (const row of rows) place(row, point, row.set.some((line) => line.id === active));
  }
  function place({ set: lines, g, colour, members, leader, label, value, reach, y, place: at, column, width }, point, on) {
    const apart = Math.min(4, width / 4), r = Math.min(2.6, width / 7), here = round(y);
    g.classList.toggle('on', on);
    members.forEach(({ line, bar, electrons }, k) => {
      const x = 14 + (column + k) * width, held = line.electrons[point], whole = Math.ceil(held - 1e-6);
      set(bar, 'd', `M${round(x)} ${here}h${round(width - apart)}`);
      electrons.forEach((circle, e) => {
        set(circle, 'visibility', e < whole ? 'inherit' : 'hidden');
        if (e >= whole) return;
        const part = e + 1 > held + 1e-6;
        set(circle, 'cx', round(x + (width - apart) / 2 + (e - (whole - 1) / 2) * 2.7 * r));
        set(circle, 'cy', here);
        set(circle, 'r', round(part ? 0.85 * r : r));
        set(circle, 'fill', part ? 'var(--ground)' : colour);
      });
    });
    set(leader, 'd', `M64 ${here}L74 ${round(at)}`);
    set(label, 'y', round(at + 3.3));
    put(label, labelAt(lines[0], point));
    set(value, 'y', round(at + 3.3));
    put(value, energyText(lines[0].energies[point]));
    set(reach, 'y', round(Math.min(y, at) - 5));
    set(reach, 'height', round(Math.abs(y - at) + 10));
  }
  return { show };
}
