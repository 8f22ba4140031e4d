// Checks of pages in Chromium: `node check.mjs PROFILE FOLDER-FOR-PICTURES-OR-"" PAGE.html…`. The first
// page is gone through in full; the others are opened, dragged along and looked at by axe.
import { mkdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { basename } from 'node:path';
import { pathToFileURL } from 'node:url';
import { open } from './browser.mjs';

const [profile, folder, ...pages] = process.argv.slice(2);
const axe = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');
const LIMITS = { bytes: 600_000, readyMs: 300, framesPerSecond: 30 };

let failed = 0, passed = 0;
function check(what, holds, more = '') {
  console.log(`${holds ? 'ok  ' : 'FAIL'} ${what}${more ? ` (${more})` : ''}`);
  if (holds) passed += 1; else failed += 1;
}
const browser = await open(profile);
const { send, ask, frame, press } = browser;
const ladder = () => ask("document.querySelector('#ladder').textContent");
const orbital = () => ask("document.querySelector('#orbital').toDataURL()");
async function picture(name) {
  if (!folder) return;
  mkdirSync(folder, { recursive: true });
  writeFileSync(`${folder}/${name}.png`, await browser.shot());
}
async function accessible(what) {
  await ask(`${axe}; 0`);
  const found = await ask("axe.run(document, { resultTypes: ['violations'] }).then((r) => r.violations.map((v) => ({ id: v.id, impact: v.impact, where: v.nodes.slice(0, 3).map((n) => n.target.join(' ')) })))");
  const bad = found.filter((v) => ['serious', 'critical'].includes(v.impact));
  const words = (list) => list.map((v) => `${v.impact} ${v.id} at ${v.where.join(', ')}`).join('; ');
  check(`axe finds nothing serious ${what}`, bad.length === 0, words(found));
}
// Moves the slider once a frame; frames per second of the wall clock and processor time of all of the
// browser's processes for one frame.
async function drag(ms) {
  const before = browser.cpu();
  const [frames, time] = await ask(`new Promise((done) => {
    const slider = document.querySelector('#slider'), start = performance.now();
    let frames = 0;
    const step = () => {
      slider.value = String(frames % (Number(slider.max) + 1));
      slider.dispatchEvent(new Event('input'));
      frames += 1;
      if (performance.now() - start < ${ms}) requestAnimationFrame(step);
      else done([frames, performance.now() - start]);
    };
    requestAnimationFrame(step);
  })`);
  return { rate: 1000 * frames / time, cpu: (browser.cpu() - before) / frames };
}
async function best(count, measure, better) {
  let found = await measure();
  for (let k = 1; k < count; k++) { const again = await measure(); if (better(again, found)) found = again; }
  return found;
}

async function whole(address, page) {
  check('the page becomes ready', await browser.go(address));
  const bytes = statSync(page).size;
  check('the page is small', bytes <= LIMITS.bytes, `${(bytes / 1000).toFixed(0)} kB`);
  // Both by the clock and, since a busy machine lets it wait, by the work of the page's own thread.
  await send('Performance.enable', { timeDomain: 'threadTicks' });
  const loads = [];
  for (let k = 0; k < 5; k++) {
    await send('Page.navigate', { url: 'about:blank' });
    await browser.go(address);
    const metrics = Object.fromEntries((await send('Performance.getMetrics')).metrics.map((m) => [m.name, m.value]));
    loads.push({
      clock: await ask("performance.getEntriesByType('navigation')[0].domContentLoadedEventEnd"),
      work: 1000 * metrics.TaskDuration,
    });
  }
  const clock = Math.min(...loads.map((load) => load.clock)), work = Math.min(...loads.map((load) => load.work));
  console.log('     ' + JSON.stringify(loads));
  check('it is ready soon', Math.min(clock, work) <= LIMITS.readyMs, `${clock.toFixed(0)} ms on the clock, ${work.toFixed(0)} ms of work, best of 5`);
  await frame();
  await picture('start');
  await accessible('in light');

  await ask("document.querySelector('#slider').focus()");
  const before = [await ladder(), await orbital()];
  await press('ArrowRight');
  check('an arrow key moves the levels', (await ladder()) !== before[0]);
  check('the orbital follows', (await orbital()) !== before[1]);
  await press('End');
  check('the last point is reached', await ask("document.querySelector('#slider').value === document.querySelector('#slider').max"));
  check('a screen reader hears the place', (await ask("document.querySelector('#slider').getAttribute('aria-valuetext')")).includes('eV'));

  await ask("document.activeElement.blur(); document.querySelector('#theme').focus()");
  const seen = ['theme'];
  for (let k = 0; k < 120; k++) {
    await press('Tab');
    const at = await ask("(() => { const e = document.activeElement; return e === document.body ? '' : e.id || e.getAttribute('class') || e.dataset.row || e.tagName; })()");
    if (!at) break;
    seen.push(at);
  }
  const hidden = await ask("[...document.querySelectorAll('button, input, select, a')].filter((e) => e.getClientRects().length && !e.disabled).map((e) => e.id || e.dataset.row || e.tagName)");
  const missed = hidden.filter((name) => !seen.includes(name));
  check('Tab reaches every control', missed.length === 0, missed.join(' ') || `${hidden.length} controls`);
  check('Tab reaches lines of the figure', seen.some((name) => name.startsWith('line')));

  await press('Escape');
  check('Escape lets go of the line', await ask("document.querySelector('#release').hidden"));
  await ask("document.querySelector('#wide g.line').focus()");
  await press('Enter', '\r');
  const first = [await ask("document.querySelector('#line-title').textContent"), await orbital()];
  check('Enter keeps a line', await ask("!document.querySelector('#release').hidden"), first[0]);
  await ask("[...document.querySelectorAll('#wide g.line')].pop().focus()");
  await press(' ', ' ');
  check('another line has another orbital', (await orbital()) !== first[1], await ask("document.querySelector('#line-title').textContent"));
  await ask("document.querySelector('#meetings button').focus()");
  const place = await ladder();
  await press('Enter', '\r');
  check('a crossing in the list is jumped to', (await ladder()) !== place, await ask("document.querySelector('#here').textContent"));
  const table = await ask(`new Promise((done) => {
    const make = URL.createObjectURL;
    URL.createObjectURL = (blob) => { URL.createObjectURL = make; blob.text().then(done); return make.call(URL, blob); };
    HTMLAnchorElement.prototype.addEventListener.call(document.querySelector('#csv'), 'click', (event) => event.preventDefault());
    document.querySelector('#csv').focus();
    document.querySelector('#csv').click();
  })`);
  const rows = table.trim().split('\r\n'), points = await ask("Number(document.querySelector('#slider').max) + 1");
  const lines = await ask("document.querySelectorAll('#levels tbody tr').length");
  check('the table to download has every point and level', rows.length === 1 + points * lines, `${rows.length - 1} rows`);
  await picture('pinned');

  const drawn = await best(4, () => drag(1500), (a, b) => a.cpu < b.cpu);
  const fast = await best(3, () => drag(1000), (a, b) => a.rate > b.rate);
  // A busy machine gives the browser fewer frames than it could draw: what it works for each counts then.
  const rate = Math.max(fast.rate, Math.min(60, 1000 / drawn.cpu));
  check('dragging is smooth', rate >= LIMITS.framesPerSecond, `${fast.rate.toFixed(0)} frames/s on the clock, ${drawn.cpu.toFixed(1)} ms of processor time for a frame`);

  await ask("document.querySelector('#theme').click()");
  await frame();
  check('there is a dark look', await ask("getComputedStyle(document.body).backgroundColor === 'rgb(20, 24, 29)'"));
  await picture('dark');
  await accessible('in dark');
  await ask("document.querySelector('#theme').click()");

  const nameless = await ask("[...document.querySelectorAll('button, input, select, canvas, [role=button], [role=img], [role=region]')].filter((e) => e.getClientRects().length && !(e.getAttribute('aria-label') || e.getAttribute('aria-labelledby') || e.textContent.trim() || e.labels?.length)).map((e) => e.id || e.tagName).join(' ')");
  check('every control has a name', nameless === '', nameless);
  await send('Emulation.setDeviceMetricsOverride', { width: 390, height: 844, deviceScaleFactor: 2, mobile: true });
  await frame();
  check('nothing sticks out on a telephone', await ask('document.documentElement.scrollWidth <= innerWidth'), await ask('`${document.documentElement.scrollWidth} of ${innerWidth} px`'));
  const telephone = await ask("(() => { const t = document.querySelector('#narrow text'); return t.getBoundingClientRect().width ? parseFloat(getComputedStyle(t).fontSize) * document.querySelector('#narrow svg').getScreenCTM().a : 0; })()");
  check('the figure can be read on a telephone', telephone >= 8, `${telephone.toFixed(1)} px`);
  await picture('telephone');
  await accessible('on a telephone');
  await send('Emulation.clearDeviceMetricsOverride');
  await send('Emulation.setEmulatedMedia', { media: 'print' });
  await frame();
  check('print leaves the controls out', await ask("[...document.querySelectorAll('#slider, #print, #csv')].every((e) => !e.getClientRects().length)"));
  await send('Emulation.setEmulatedMedia', { media: '' });
  const { data } = await send('Page.printToPDF', { printBackground: true, preferCSSPageSize: true });
  const pdf = Buffer.from(data, 'base64'), sheets = pdf.toString('latin1').match(/\/Type\s*\/Page\b/g)?.length;
  check('it prints on two sheets', sheets <= 2, `${sheets}`);
  if (folder) writeFileSync(`${folder}/print.pdf`, pdf);
  await withoutScript();
}

async function withoutScript() {
  await send('Emulation.setScriptExecutionDisabled', { value: true });
  await send('Page.reload');
  let nodeIds = [];
  for (let k = 0; k < 40 && nodeIds.length === 0; k++) {
    await new Promise((done) => setTimeout(done, 250));
    try {
      const { root } = await send('DOM.getDocument', { depth: -1 });
      ({ nodeIds } = await send('DOM.querySelectorAll', { nodeId: root.nodeId, selector: '#wide svg .line' }));
    } catch { /* the document was replaced between the two questions */ }
  }
  check('the figure stands without script', nodeIds.length > 0, `${nodeIds.length} lines`);
  if (folder) await new Promise((done) => setTimeout(done, 500));
  await picture('static');
  await send('Emulation.setScriptExecutionDisabled', { value: false });
}

async function brief(address, name) {
  check(`${name} becomes ready`, await browser.go(address));
  await frame();
  const before = await ladder();
  await ask("document.querySelector('#slider').focus()");
  await press('Home');
  check(`${name} moves`, (await ladder()) !== before);
  await picture(name);
  await accessible(`in ${name}`);
}

try {
  const [first, ...others] = pages.map((page) => [pathToFileURL(page).href, page]);
  await whole(...first);
  for (const [address, page] of others) await brief(address, basename(page, '.html'));
  check('no error on the console', browser.complaints.length === 0, browser.complaints.join('; '));
  const own = pages.map((page) => pathToFileURL(page).href);
  const outside = browser.requests.filter((url) => !own.includes(url) && !/^(blob|data):|^about:blank$/.test(url));
  check('no request', outside.length === 0, outside.join(' '));
} finally {
  browser.close();
}
console.log(`${passed} passed, ${failed} failed`);
process.exit(failed ? 1 : 0);
