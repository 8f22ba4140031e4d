(() => {
  const data = JSON.parse(document.getElementById('data').textContent);
  const $ = (id) => document.getElementById(id);
  const count = data.at.length, functions = data.shells.reduce((sum, s) => sum + 2 * s.l + 1, 0);
  const byId = new Map(data.lines.map((line) => [line.id, line]));
  const shells = data.shells.filter((shell) => shell.zeta.length).map(prepareShell);
  const frame = frameOf(data.positions), planes = planesOf(frame), chosenPlane = new Map();
  const state = { point: 0, hovered: null, pinned: null, cut: 'auto' };

  // ---- words
  const minus = (text) => text.replace('-', '\u2212');
  const fixed = (value, digits) => (value === null || value === undefined ? '–' : minus(value.toFixed(digits)));
  const trim = (value) => minus(String(Math.round(value * 1000) / 1000));
  const withUnit = (value) => trim(value) + ({ degree: '°', angstrom: ' Å' }[data.unit] || '');
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
  function ownLabel(line, point) {
    const special = line.passport.special.find((s) => Math.abs(s.at - data.at[point]) < 1e-6);
    if (!special) return labelOf(line);
    return (!data.core && special.valence_label) || special.label;
  }

  const SUB = (text) => text.replace(/\d/g, (d) => String.fromCharCode(0x2080 + Number(d)));
  function plainText(plain) {
    const found = /^(\d*)(sigma|pi|delta|phi|gamma|[abegthi])_?([0-9gu]*)(['+-]*)$/.exec(plain);
    if (!found) return plain;
    const tail = found[4].replace("''", '″').replace("'", '′').replace('+', '⁺').replace('-', '⁻');
    return found[1] + (GREEK[found[2]] || found[2]) + SUB(found[3]) + tail;
  }

  // ---- the diagram, wide or narrow, and the ladder beside it
  const nearest = (value) => data.at.reduce((best, at, k) => (Math.abs(at - value) < Math.abs(data.at[best] - value) ? k : best), 0);
  const hands = {
    dragged: false,
    moveTo: (value) => go(nearest(value)),
    listen(target, id) {
      target.addEventListener('pointerenter', () => hover(id));
      target.addEventListener('pointerleave', () => hover(null));
      target.addEventListener('click', () => { if (!hands.dragged) turn(id); });
    },
    // Not for the ladder: its rungs are made anew, and the table below has them as buttons.
    listenToKeys(target, id) {
      target.addEventListener('focus', () => hover(id));
      target.addEventListener('blur', () => hover(null));
      target.addEventListener('keydown', (event) => {
        if (event.key === 'Enter' || event.key === ' ') { event.preventDefault(); turn(id); }
      });
    },
  };
  window.addEventListener('pointerdown', () => { hands.dragged = false; }, true);
  const book = { data, byId, labelOf };
  // The narrow drawing is for telephones: made when it is first asked for.
  const small = window.matchMedia('(max-width: 720px)'), stages = {};
  function stage() {
    const name = small.matches && !printing ? 'narrow' : 'wide';
    if (!stages[name]) {
      const made = makeStage($(name), data.areas[name === 'wide' ? 0 : 1], book, hands);
      const holder = element('div');
      holder.className = name;
      $('ladder').append(holder);
      if (name === 'wide') $('ladder').style.flexGrow = String(LADDER_WIDTH / made.box.width);
      const ladder = makeLadder(holder, made, {
        titleAt: (point) => withUnit(data.at[point]),
        labelAt: (line, point) => plainText(ownLabel(line, point)),
        energyText: (energy) => fixed(energy, 2),
        listen: hands.listen,
      });
      stages[name] = { show(point, id, pinned) { made.show(point, id, pinned); ladder.show(point, id); } };
    }
    return stages[name];
  }
  small.addEventListener('change', () => later());
  let printing = false;

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
  function pin(id) {
    state.pinned = id;
    const line = byId.get(id);
    $('said').textContent = line
      ? `${plainText(labelOf(line))} kept, ${fixed(line.energies[state.point], 2)} eV, ${trim(line.electrons[state.point])} electrons`
      : 'No line kept';
    later();
  }
  const turn = (id) => pin(state.pinned === id ? null : id);
  const active = () => (state.pinned !== null ? state.pinned : state.hovered);

  // ---- drawing everything that depends on the state
  function draw() {
    const p = state.point, id = active();
    slider.value = String(p);
    const sum = data.sum[p];
    slider.setAttribute('aria-valuetext', `${withUnit(data.at[p])}, sum ${fixed(sum, 2)} eV`);
    put($('here'), `${withUnit(data.at[p])} · sum ${fixed(sum, 3)} eV`);
    stage().show(p, id, state.pinned);
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
  const psiOf = (line, point) => orbitalAt(shells, line.coefficients, point * functions, data.positions[point]);
  function planeOf(line) {
    if (!chosenPlane.has(line.id)) {
      const sample = [0, (count - 1) >> 1, count - 1].map((k) => ({ atoms: data.positions[k], psiAt: psiOf(line, k) }));
      chosenPlane.set(line.id, choosePlane(frame, planes, sample));
    }
    return chosenPlane.get(line.id);
  }
  // Coarse while things move, fine when they rest.
  let rest = 0;
  function drawPicture(fine = 240) {
    clearTimeout(rest);
    if (fine < 720) rest = setTimeout(() => { drawPicture(720); drawTable(); }, 160);
    const line = byId.get(active()), p = state.point, has = line && line.coefficients.length > 0 && shells.length > 0;
    const size = fine < 720 ? 360 : 720;
    if ($('orbital').width !== size) $('orbital').width = $('orbital').height = size;
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
    put($('plane'), has
      ? `ψ in ${plane.words}; plain green positive, hatched purple negative; contours ±0.025, 0.05, 0.1 … bohr⁻³ᐟ²`
      : `${data.name} at ${withUnit(data.at[p])}` + (functions ? '. Choose a line to see its orbital.' : ''));
  }
  const mostly = (line, point) => {
    const from = point * data.shells.length;
    return data.shells
      .map((shell, k) => ({ share: line.shares[from + k] / 1000, name: `${data.elements[shell.atom]}${data.elements.length > 1 ? shell.atom + 1 : ''} ${shell.shell}` }))
      .filter((part) => Number.isFinite(part.share));
  };
  function term(list, name, ...content) { list.append(element('dt', name), element('dd', ...content)); }
  // The card is made anew for another line only; what changes along the path is written into it.
  let shownCard = { id: undefined };
  function drawCard() {
    const line = byId.get(active()), p = state.point;
    $('release').hidden = state.pinned === null;
    if (shownCard.id !== line?.id) shownCard = line ? makeCard(line) : emptyCard();
    if (!line) return;
    const electrons = line.electrons[p];
    put(shownCard.electrons, electrons > 0 ? ` ${trim(electrons)} electron${electrons === 1 ? '' : 's'}` : ' empty');
    put(shownCard.energy, `${fixed(line.energies[p], 3)} eV`);
    mostly(line, p).forEach(({ share }, k) => {
      shownCard.meters[k].style.setProperty('--share', String(Math.max(0, Math.min(1, share))));
      put(shownCard.percents[k], `${fixed(100 * share, 1)} %`);
    });
  }
  function emptyCard() {
    put($('line-title'), 'No line chosen');
    $('card').replaceChildren(element('p', 'Point at a line of the diagram, or walk to one with the Tab key.'));
    return { id: undefined };
  }
  function makeCard(line) {
    const electrons = element('small'), energy = element('span'), list = document.createElement('dl');
    $('line-title').replaceChildren(lettered(labelOf(line)), electrons);
    term(list, 'Energy here', energy);
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
    const card = { id: line.id, electrons, energy, meters: [], percents: [] }, parts = mostly(line, 0);
    $('card').replaceChildren(list);
    if (!parts.length) return card;
    const bars = element('ul');
    bars.className = 'shares';
    for (const { name } of parts) {
      const meter = element('span'), percent = element('span');
      meter.className = 'bar';
      card.meters.push(meter);
      card.percents.push(percent);
      bars.append(element('li', element('span', name), meter, percent));
    }
    $('card').append(element('h3', 'Made of'), bars);
    return card;
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
      button.addEventListener('click', () => turn(line.id));
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
    button.addEventListener('click', () => { go(nearest(meeting.at)); pin(a.id); });
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
  let ownTheme = false, worn = wish.matches;
  function wear(dark) { worn = dark; dress(dark); later(); }
  $('theme').addEventListener('click', () => { ownTheme = true; wear(!worn); });
  wish.addEventListener('change', () => { if (!ownTheme) wear(wish.matches); });
  window.addEventListener('beforeprint', () => { printing = true; dress(false); draw(); drawPicture(720); });
  window.addEventListener('afterprint', () => { printing = false; dress(worn); draw(); });
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
