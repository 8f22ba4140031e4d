const SVG = 'http://www.w3.org/2000/svg';
function drawn(name, attributes, parent) {
  const made = document.createElementNS(SVG, name);
  for (const [key, value] of Object.entries(attributes)) made.setAttribute(key, value);
  if (parent) parent.append(made);
  return made;
}

// One drawing of the diagram with its cursor. `book` holds the data and their words; `hands` what
// happens when a line is pointed at or pressed, or the diagram dragged.
function makeStage(holder, area, book, hands) {
  const { data, byId, labelOf } = book, count = data.at.length;
  const svg = holder.querySelector('svg'), box = svg.viewBox.baseVal;
  const bundles = area.lines.map((ids) => ids.map((id) => byId.get(id))).filter((set) => set[0]);
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
  const dots = bundles.map((set) => drawn('circle', { r: 2.2, fill: colourOf(set[0].id) }, cursor));

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
    cursorLine.setAttribute('transform', `translate(${x} 0)`);
    bundles.forEach((set, k) => {
      const energy = set[0].energies[point];
      dots[k].setAttribute('visibility', shown(energy) ? 'visible' : 'hidden');
      if (shown(energy)) { dots[k].setAttribute('cx', x); dots[k].setAttribute('cy', height(energy)); }
    });
    svg.classList.toggle('chosen', Boolean(marked));
    for (const g of sets) {
      g.classList.toggle('on', g === marked);
      g.setAttribute('aria-pressed', String(pinned !== null && g === groups.get(pinned)));
    }
  }
  return { area, box, bundles, height, shown, colourOf, show };
}

// The levels of one point as rungs on the scale of a stage, with their electrons and labels.
const LADDER_WIDTH = 150;
function drawLadder(ladder, stage, point, active, { title, labelAt, energyText, listen }) {
  const { area, box, bundles, height, shown, colourOf } = stage, rows = [];
  ladder.replaceChildren();
  ladder.setAttribute('viewBox', `0 0 ${LADDER_WIDTH} ${box.height}`);
  ladder.parentNode.style.flexGrow = String(LADDER_WIDTH / box.width);
  drawn('text', { x: 14, y: area.down[0] - 8, class: 'where' }, ladder).textContent = title;
  for (const set of bundles) {
    const energy = set[0].energies[point];
    if (shown(energy)) rows.push({ set, y: height(energy), place: height(energy) });
  }
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
  for (const { set, y, place, column, width } of rows) {
    const line = set[0], colour = colourOf(line.id), on = set.some((l) => l.id === active);
    const g = drawn('g', { class: on ? 'rung on' : 'rung' }, ladder), apart = Math.min(4, width / 4), r = Math.min(2.6, width / 7);
    set.forEach((member, k) => {
      const x = 14 + (column + k) * width;
      drawn('path', { d: `M${x} ${y}H${x + width - apart}`, stroke: colour, 'stroke-width': on ? 3 : 1.6 }, g);
      const electrons = member.electrons[point], whole = Math.ceil(electrons - 1e-6);
      for (let e = 0; e < whole; e++) {
        const part = e + 1 > electrons + 1e-6;
        drawn('circle', { cx: x + (width - apart) / 2 + (e - (whole - 1) / 2) * 2.7 * r, cy: y, r: part ? 0.85 * r : r, fill: part ? 'var(--ground)' : colour, stroke: colour, 'stroke-width': 0.6 }, g);
      }
    });
    drawn('path', { d: `M64 ${y}L74 ${place}`, stroke: '#656d76', 'stroke-width': 0.5, fill: 'none' }, g);
    drawn('text', { x: 77, y: place + 3.3, fill: colour }, g).textContent = labelAt(line, point);
    drawn('text', { x: LADDER_WIDTH - 3, y: place + 3.3, class: 'value' }, g).textContent = energyText(line.energies[point]);
    drawn('rect', { x: 8, y: Math.min(y, place) - 5, width: LADDER_WIDTH - 8, height: Math.abs(y - place) + 10, class: 'reach' }, g);
    listen(g, line.id);
  }
}
