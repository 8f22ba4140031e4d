(() => {
  const data = JSON.parse(document.getElementById('data').textContent);
  const $ = (id) => document.getElementById(id);
  const SVG = 'http://www.w3.org/2000/svg';
  const count = data.at.length, functions = data.shells.reduce((sum, s) => sum + 2 * s.l + 1, 0);
  const byId = new Map(data.lines.map((line) => [line.id, line]));
  const shells = data.shells.filter((shell) => shell.zeta.length).map(prepareShell);
  const frame = frameOf(data.positions), planes = planesOf(frame), chosenPlane = new Map();
  const bundles = data.area.lines.map((ids) => ids.map((id) => byId.get(id))).filter((set) => set[0]);
  const state = { point: 0, hovered: null, pinned: null, cut: 'auto' };

  // ---- words
  const minus = (text) => text.replace('-', '\u2212');
  const fixed = (value, digits) => (value === null || value === undefined ? '–' : minus(value.toFixed(digits)));
  const trim = (value) => minus(String(Math.round(value * 1000) / 1000));
  const withUnit = (value) => trim(value) + { degree: '°', angstrom: ' Å', share: '' }[data.unit];
  const labelOf = (line) => (data.core ? line.label : line.valence);
  const GREEK = { sigma: 'σ', pi: 'π', delta: 'δ', phi: 'φ', gamma: 'γ' };
  // "3sigma_g+" → 3σ, g below, + above.
  function lettered(plain) {
    const found = /^(\d*)(sigma|pi|delta|phi|gamma|[abegthi])_?([0-9gu]*)(['+-]*)$/.exec(plain);
    const span = document.createElement('span');
    if (!found) { span.textContent = plain; return span; }
    span.append(found[1] + (GREEK[found[2]] || found[2]));
    if (found[3]) span.append(element('sub', found[3]));
    const tail = found[4].replace("''", '″').replace("'", '′');
    if (tail) span.append(/[+-]/.test(tail) ? element('sup', minus(tail)) : tail);
    return span;
  }
  function groupName(plain) {
    const span = document.createElement('span');
    span.append(plain[0], element('sub', plain.slice(1).replace('inf', '∞')));
    return span;
  }
  function element(name, ...content) {
    const made = document.createElement(name);
    made.append(...content);
    return made;
  }
  function drawn(name, attributes, parent) {
    const made = document.createElementNS(SVG, name);
    for (const [key, value] of Object.entries(attributes)) made.setAttribute(key, value);
    if (parent) parent.append(made);
    return made;
  }
  function ownLabel(line, point) {
    const special = line.passport.special.find((s) => Math.abs(s.at - data.at[point]) < 1e-6);
    if (!special) return labelOf(line);
    return (!data.core && special.valence_label) || special.label;
  }

  // ---- the figure
  const svg = $('figure').querySelector('svg');
  const box = svg.viewBox.baseVal, area = data.area;
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
  const shown = (energy) => energy >= area.energies[0][0] && energy <= area.energies[area.energies.length - 1][1];
  const cursor = drawn('g', { class: 'cursor' }, svg);
  const cursorLine = drawn('path', { d: '' }, cursor);
  const cursorDots = drawn('g', {}, cursor);
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
    listen(g, line.id);
    listenToKeys(g, line.id);
  }
  function listen(target, id) {
    target.addEventListener('pointerenter', () => hover(id));
    target.addEventListener('pointerleave', () => hover(null));
    target.addEventListener('click', () => { if (!dragged) pin(state.pinned === id ? null : id); });
  }
  // Not for the ladder: its rungs are made anew, and the table below has them as buttons.
  function listenToKeys(target, id) {
    target.addEventListener('focus', () => hover(id));
    target.addEventListener('blur', () => hover(null));
    target.addEventListener('keydown', (event) => {
      if (event.key === 'Enter' || event.key === ' ') { event.preventDefault(); pin(state.pinned === id ? null : id); }
    });
  }
  // Dragging anywhere on the diagram moves along the path.
  let dragging = false, dragged = false, startX = 0;
  const atPointer = (event) => {
    const r = svg.getBoundingClientRect(), x = (event.clientX - r.left) / r.width * box.width;
    const share = (x - area.across[0]) / (area.across[1] - area.across[0]);
    const value = data.at[0] + Math.max(0, Math.min(1, share)) * (data.at[count - 1] - data.at[0]);
    return nearest(value);
  };
  const nearest = (value) => data.at.reduce((best, at, k) => (Math.abs(at - value) < Math.abs(data.at[best] - value) ? k : best), 0);
  svg.addEventListener('pointerdown', (event) => { dragging = true; dragged = false; startX = event.clientX; });
  svg.addEventListener('pointermove', (event) => {
    if (!dragging) return;
    if (Math.abs(event.clientX - startX) > 4) dragged = true;
    if (dragged) go(atPointer(event));
  });
  window.addEventListener('pointerup', () => { dragging = false; });

  // ---- the ladder, on the figure's scale
  const ladderWidth = 150;
  const ladder = drawn('svg', { viewBox: `0 0 ${ladderWidth} ${box.height}` }, $('ladder'));
  $('ladder').style.flexGrow = String(ladderWidth / box.width);
  function colourOf(id) { const g = groups.get(id); return g ? g.querySelector('path').getAttribute('stroke') : '#656d76'; }
  function drawLadder() {
    ladder.replaceChildren();
    const p = state.point, rows = [];
    const title = drawn('text', { x: 14, y: area.down[0] - 8, class: 'where' }, ladder);
    title.textContent = withUnit(data.at[p]);
    for (const set of bundles) {
      const energy = set[0].energies[p];
      if (energy === null || !shown(energy)) continue;
      rows.push({ set, y: height(energy), place: height(energy) });
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
      const line = set[0], colour = colourOf(line.id), on = set.some((l) => l.id === active());
      const g = drawn('g', { class: on ? 'rung on' : 'rung' }, ladder), gap = Math.min(4, width / 4), r = Math.min(2.6, width / 7);
      set.forEach((member, k) => {
        const x = 14 + (column + k) * width;
        drawn('path', { d: `M${x} ${y}H${x + width - gap}`, stroke: colour, 'stroke-width': on ? 3 : 1.6 }, g);
        const electrons = member.electrons[p], whole = Math.ceil(electrons - 1e-6);
        for (let e = 0; e < whole; e++) {
          const part = e + 1 > electrons + 1e-6;
          drawn('circle', { cx: x + (width - gap) / 2 + (e - (whole - 1) / 2) * 2.7 * r, cy: y, r: part ? 0.85 * r : r, fill: part ? 'var(--ground)' : colour, stroke: colour, 'stroke-width': 0.6 }, g);
        }
      });
      drawn('path', { d: `M64 ${y}L74 ${place}`, stroke: '#656d76', 'stroke-width': 0.5, fill: 'none' }, g);
      const text = drawn('text', { x: 77, y: place + 3.3, fill: colour }, g);
      text.textContent = plainText(ownLabel(line, p));
      const value = drawn('text', { x: ladderWidth - 3, y: place + 3.3, class: 'value' }, g);
      value.textContent = fixed(line.energies[p], 2);
      drawn('rect', { x: 8, y: Math.min(y, place) - 5, width: ladderWidth - 8, height: Math.abs(y - place) + 10, class: 'reach' }, g);
      listen(g, line.id);
    }
  }
  const SUB = (text) => text.replace(/\d/g, (d) => String.fromCharCode(0x2080 + Number(d)));
  function plainText(plain) {
    const found = /^(\d*)(sigma|pi|delta|phi|gamma|[abegthi])_?([0-9gu]*)(['+-]*)$/.exec(plain);
    if (!found) return plain;
    const tail = found[4].replace("''", '″').replace("'", '′').replace('+', '⁺').replace('-', '⁻');
    return found[1] + (GREEK[found[2]] || found[2]) + SUB(found[3]) + tail;
  }

  // ---- moving
  const slider = $('slider');
  slider.max = String(count - 1);
  slider.setAttribute('aria-label', data.coordinate);
  slider.addEventListener('input', () => go(Number(slider.value)));
  $('back').addEventListener('click', () => go(state.point - 1));
  $('forth').addEventListener('click', () => go(state.point + 1));
  let pending = false, moved = -1e9;
  function later() {
    if (pending) return;
    pending = true;
    requestAnimationFrame(() => { pending = false; draw(); });
  }
  function go(point) {
    point = Math.max(0, Math.min(count - 1, point));
    if (point === state.point) return;
    state.point = point;
    moved = performance.now();
    later();
  }
  function hover(id) { state.hovered = id; later(); }
  function pin(id) { state.pinned = id; later(); }
  const active = () => (state.pinned !== null ? state.pinned : state.hovered);

  // ---- drawing everything that depends on the state
  function draw() {
    const p = state.point, id = active(), x = across(p);
    slider.value = String(p);
    const sum = data.sum[p];
    slider.setAttribute('aria-valuetext', `${withUnit(data.at[p])}, sum ${fixed(sum, 2)} eV`);
    $('here').textContent = `${withUnit(data.at[p])} · sum ${fixed(sum, 3)} eV`;
    cursorLine.setAttribute('d', `M${x} ${area.down[0]}V${area.down[1]}`);
    cursorDots.replaceChildren();
    for (const set of bundles) {
      const energy = set[0].energies[p];
      if (energy !== null && shown(energy)) drawn('circle', { cx: x, cy: height(energy), r: 2.2, fill: colourOf(set[0].id) }, cursorDots);
    }
    const marked = id === null ? null : groups.get(id);
    svg.classList.toggle('chosen', Boolean(marked));
    for (const g of new Set(groups.values())) {
      g.classList.toggle('on', g === marked);
      g.setAttribute('aria-pressed', String(state.pinned !== null && g === groups.get(state.pinned)));
    }
    drawLadder();
    drawCard();
    drawPicture();
    // A reader of the table waits until things rest.
    if (performance.now() - moved > 150) drawTable();
  }
  const theme = () => document.documentElement.dataset.theme;
  const LOOKS = {
    light: { ground: '#ffffff', paper: [255, 255, 255], ink: '#1b1f24', plus: [11, 111, 92], minus: [139, 43, 120] },
    dark: { ground: '#14181d', paper: [20, 24, 29], ink: '#eef1f4', plus: [111, 208, 185], minus: [221, 154, 208] },
  };
  function psiOf(line, point) {
    const atoms = data.positions[point];
    return (x, y, z) => psi(shells, line.coefficients, point * functions, atoms, x, y, z) * 1e-4;
  }
  function planeOf(line) {
    if (!chosenPlane.has(line.id)) {
      const sample = [0, (count - 1) >> 1, count - 1].map((k) => ({ atoms: data.positions[k], psiAt: psiOf(line, k) }));
      chosenPlane.set(line.id, choosePlane(frame, planes, sample));
    }
    return chosenPlane.get(line.id);
  }
  // Coarse while things move, fine when they rest.
  let rest = 0;
  function drawPicture(fine = 360) {
    clearTimeout(rest);
    if (fine < 720) rest = setTimeout(() => { drawPicture(720); drawTable(); }, 160);
    const line = byId.get(active()), p = state.point, has = line && line.coefficients.length > 0 && shells.length > 0;
    const index = state.cut !== 'auto' ? Number(state.cut) : has ? planeOf(line) : 0;
    const plane = planes[index];
    drawOrbital($('orbital'), {
      frame, plane, atoms: data.positions[p], elements: data.elements, bonds: data.bonds,
      psiAt: has ? psiOf(line, p) : null, colours: LOOKS[theme()], fine,
    });
    const label = line ? plainText(labelOf(line)) : '';
    $('orbital').setAttribute('aria-label', has
      ? `Contours of orbital ${label} of ${data.name} at ${withUnit(data.at[p])}, in ${plane.words}`
      : `The atoms of ${data.name} at ${withUnit(data.at[p])}`);
    $('plane').textContent = has
      ? `ψ in ${plane.words}; plain green positive, hatched purple negative; contours ±0.025, 0.05, 0.1 … bohr⁻³ᐟ²`
      : `${data.name} at ${withUnit(data.at[p])}` + (functions ? '. Choose a line to see its orbital.' : '');
  }
  const mostly = (line, point) => {
    const from = point * data.shells.length;
    return data.shells
      .map((shell, k) => ({ share: line.shares[from + k] / 1000, name: `${data.elements[shell.atom]}${data.elements.length > 1 ? shell.atom + 1 : ''} ${shell.shell}` }))
      .filter((part) => Number.isFinite(part.share));
  };
  function term(list, name, ...content) { list.append(element('dt', name), element('dd', ...content)); }
  function drawCard() {
    const line = byId.get(active()), p = state.point, card = $('card');
    $('release').hidden = state.pinned === null;
    card.replaceChildren();
    if (!line) {
      $('line-title').textContent = 'No line chosen';
      card.append(element('p', 'Point at a line of the diagram, or walk to one with the Tab key.'));
      return;
    }
    const electrons = line.electrons[p];
    $('line-title').replaceChildren(lettered(labelOf(line)), element('small', electrons > 0 ? ` ${trim(electrons)} electron${electrons === 1 ? '' : 's'}` : ' empty'));
    const list = document.createElement('dl');
    term(list, 'Energy here', `${fixed(line.energies[p], 3)} eV`);
    term(list, 'Start to end', `${fixed(line.energies[0], 2)} → ${fixed(line.energies[count - 1], 2)} eV`);
    term(list, 'In the path group', lettered(line.irrep), line.degeneracy > 1 ? ` (${line.degeneracy}-fold)` : '');
    term(list, 'At the start', lettered(ownLabel(line, 0)), ' in ', groupName(data.group[0]));
    term(list, 'At the end', lettered(ownLabel(line, count - 1)), ' in ', groupName(data.group[count - 1]));
    const other = data.core ? line.passport.other_axes : line.passport.other_axes_valence || line.passport.other_axes;
    if (other && other !== labelOf(line)) term(list, 'With the other axes', lettered(other));
    for (const special of line.passport.special) {
      if (Math.abs(special.at - data.at[0]) < 1e-6 || Math.abs(special.at - data.at[count - 1]) < 1e-6) continue;
      term(list, `At ${withUnit(special.at)}`, lettered(special.label), ' in ', groupName(special.point_group));
    }
    term(list, data.core ? 'Counting valence levels' : 'Counting core levels', lettered(data.core ? line.valence : line.label));
    if (line.evidence) term(list, 'Followed by', { symmetry: 'symmetry', overlap: 'overlap of neighbours', ambiguous: 'more than one way is possible' }[line.evidence]);
    card.append(list);
    const parts = mostly(line, p);
    if (!parts.length) return;
    const bars = element('ul');
    bars.className = 'shares';
    for (const { name, share } of parts) {
      const meter = document.createElement('span');
      meter.className = 'bar';
      meter.style.setProperty('--share', String(Math.max(0, Math.min(1, share))));
      bars.append(element('li', element('span', name), meter, element('span', `${fixed(100 * share, 1)} %`)));
    }
    card.append(element('h3', 'Made of'), bars);
  }

  // ---- table, crossings, tools
  const body = $('levels').querySelector('tbody');
  function drawTable() {
    const p = state.point, rows = data.lines.filter((line) => line.energies[p] !== null).sort((a, b) => b.energies[p] - a.energies[p]);
    $('levels-title').textContent = `Levels at ${withUnit(data.at[p])}`;
    const focused = document.activeElement && document.activeElement.dataset.row;
    body.replaceChildren(...rows.map((line) => {
      const button = element('button', lettered(labelOf(line)));
      button.type = 'button';
      button.dataset.row = String(line.id);
      button.setAttribute('aria-pressed', String(state.pinned === line.id));
      button.addEventListener('click', () => pin(state.pinned === line.id ? null : line.id));
      const head = element('th', button);
      head.scope = 'row';
      const top = mostly(line, p).sort((a, b) => b.share - a.share).slice(0, 2).map((part) => `${part.name} ${Math.round(100 * part.share)} %`).join(', ');
      const cells = [ownLabel(line, p), null, null].map((plain) => element('td', plain ? lettered(plain) : ''));
      cells[1].textContent = fixed(line.energies[p], 3);
      cells[2].textContent = trim(line.electrons[p]);
      cells[1].className = cells[2].className = 'n';
      const row = element('tr', head, ...cells, element('td', top));
      row.classList.toggle('on', line.id === active());
      return row;
    }));
    if (focused) { const again = body.querySelector(`[data-row="${focused}"]`); if (again) again.focus({ preventScroll: true }); }
  }
  const meetings = $('meetings').querySelector('ul');
  for (const meeting of data.crossings) {
    const [a, b] = meeting.lines.map((id) => byId.get(id));
    if (!a || !b || meeting.at === null) continue;
    const verb = { crossing: ' crosses ', avoided: ' avoids ', touching: ' joins ' }[meeting.kind];
    const more = meeting.gap !== undefined ? `, gap ${fixed(meeting.gap, 2)} eV` : meeting.energy !== undefined ? `, ${fixed(meeting.energy, 2)} eV` : '';
    const button = element('button', lettered(labelOf(a)), verb, lettered(labelOf(b)), ` at ${withUnit(meeting.at)}${more}`);
    button.type = 'button';
    button.addEventListener('click', () => { state.pinned = a.id; go(nearest(meeting.at)); later(); });
    meetings.append(element('li', button));
  }
  function csv() {
    const quote = (text) => (/[",\r\n]/.test(text) ? `"${text.replace(/"/g, '""')}"` : text);
    const rows = ['point,at_1,level,energy_ev,occupation,label,valence_label,full_label,irrep,line,point_group'];
    data.at.forEach((at, p) => {
      const here = data.lines.filter((line) => line.energies[p] !== null).sort((a, b) => a.energies[p] - b.energies[p] || a.id - b.id);
      here.forEach((line, k) => {
        const special = line.passport.special.find((s) => Math.abs(s.at - at) < 1e-6);
        rows.push([p + 1, at, k + 1, line.energies[p], line.electrons[p], line.label, line.valence, special ? special.label : line.label, line.irrep, line.id, data.group[p]].map((v) => quote(String(v))).join(','));
      });
    });
    return rows.join('\r\n') + '\r\n';
  }
  $('csv').addEventListener('click', () => {
    const link = $('csv'), url = URL.createObjectURL(new Blob([csv()], { type: 'text/csv' }));
    link.href = url;
    link.download = `${data.name}-levels.csv`;
    setTimeout(() => { URL.revokeObjectURL(url); link.href = '#levels'; }, 2000);
  });
  $('csv').addEventListener('keydown', (event) => { if (event.key === ' ') { event.preventDefault(); $('csv').click(); } });
  $('release').addEventListener('click', () => { pin(null); slider.focus(); });
  for (const [value, words] of [['auto', 'chosen for the line'], ...planes.map((plane, k) => [String(k), plane.words])]) {
    const option = element('option', words);
    option.value = value;
    $('cut').append(option);
  }
  $('cut').addEventListener('change', () => { state.cut = $('cut').value; later(); });
  const wish = window.matchMedia('(prefers-color-scheme: dark)');
  function dress(dark) {
    document.documentElement.dataset.theme = dark ? 'dark' : 'light';
    $('theme').setAttribute('aria-pressed', String(dark));
  }
  let ownTheme = false;
  $('theme').addEventListener('click', () => { ownTheme = true; dress(theme() !== 'dark'); later(); });
  wish.addEventListener('change', () => { if (!ownTheme) { dress(wish.matches); later(); } });
  window.addEventListener('beforeprint', () => { dress(false); draw(); });
  window.addEventListener('afterprint', () => { dress(ownTheme ? false : wish.matches); draw(); });
  $('print').addEventListener('click', () => window.print());
  document.addEventListener('keydown', (event) => { if (event.key === 'Escape') pin(null); });

  for (const hidden of document.querySelectorAll('[hidden]')) if (hidden.id !== 'release') hidden.hidden = false;
  $('meetings').hidden = meetings.children.length === 0;
  $('view').hidden = functions === 0;
  dress(wish.matches);
  // The frontier is what people ask about first.
  const middle = (count - 1) >> 1;
  state.point = middle;
  const filled = data.lines.filter((line) => line.electrons[middle] > 0).sort((a, b) => b.energies[middle] - a.energies[middle]);
  if (filled.length) state.pinned = filled[0].id;
  draw();
  document.documentElement.dataset.ready = 'yes';
})();
