// Drives Chromium over its debugging pipe; no package is needed.
import { spawn } from 'node:child_process';
import { statSync, writeFileSync } from 'node:fs';
import { pathToFileURL } from 'node:url';

const [page, profile, pictures] = process.argv.slice(2);
const address = pathToFileURL(page).href;
const browser = spawn('chromium', [
  '--headless', '--no-sandbox', '--disable-gpu', '--no-first-run', '--disable-background-networking',
  `--user-data-dir=${profile}`, '--remote-debugging-pipe', '--window-size=1280,1500', 'about:blank',
], { stdio: ['ignore', 'ignore', 'ignore', 'pipe', 'pipe'] });

let next = 1;
let unread = '';
const waiting = new Map();
const complaints = [];
const requests = [];
browser.stdio[4].on('data', (bytes) => {
  const pieces = (unread + bytes).split('\0');
  unread = pieces.pop();
  for (const message of pieces.map((piece) => JSON.parse(piece))) {
    if (message.id) {
      const { resolve, reject } = waiting.get(message.id);
      waiting.delete(message.id);
      if (message.error) reject(new Error(message.error.message));
      else resolve(message.result);
    } else if (message.method === 'Network.requestWillBeSent') requests.push(message.params.request.url);
    else if (message.method === 'Runtime.exceptionThrown') complaints.push(message.params.exceptionDetails.exception?.description || message.params.exceptionDetails.text);
    else if (message.method === 'Log.entryAdded' && message.params.entry.level === 'error') complaints.push(message.params.entry.text);
    else if (message.method === 'Runtime.consoleAPICalled' && message.params.type === 'error') complaints.push('console.error');
  }
});
let session;
function send(method, params = {}) {
  const id = next++;
  browser.stdio[3].write(`${JSON.stringify({ id, method, params, sessionId: session })}\0`);
  return new Promise((resolve, reject) => waiting.set(id, { resolve, reject }));
}
async function ask(expression) {
  const { result, exceptionDetails } = await send('Runtime.evaluate', { expression, returnByValue: true, awaitPromise: true });
  if (exceptionDetails) throw new Error(`${expression}: ${exceptionDetails.exception?.description}`);
  return result.value;
}
const frame = () => ask('new Promise((done) => requestAnimationFrame(() => requestAnimationFrame(() => done(1))))');
async function press(key, code = key, text) {
  const codes = { Tab: 9, Enter: 13, ArrowRight: 39, ArrowLeft: 37, Home: 36, End: 35, Escape: 27 };
  const params = { key, code, windowsVirtualKeyCode: codes[key], text };
  await send('Input.dispatchKeyEvent', { type: text ? 'keyDown' : 'rawKeyDown', ...params });
  await send('Input.dispatchKeyEvent', { type: 'keyUp', ...params });
  await frame();
}
async function picture(name) {
  if (!pictures) return;
  const { data } = await send('Page.captureScreenshot', { format: 'png', captureBeyondViewport: true });
  writeFileSync(`${pictures}/${name}.png`, Buffer.from(data, 'base64'));
}
let failed = 0;
function check(what, holds, more = '') {
  console.log(`${holds ? 'ok  ' : 'FAIL'} ${what}${more ? ` (${more})` : ''}`);
  if (!holds) failed += 1;
}
const ladder = () => ask("document.querySelector('#ladder').textContent");
const orbital = () => ask("document.querySelector('#orbital').toDataURL()");

try {
  const { targetId } = await send('Target.createTarget', { url: 'about:blank' });
  session = (await send('Target.attachToTarget', { targetId, flatten: true })).sessionId;
  for (const domain of ['Page', 'Runtime', 'Log', 'Network', 'DOM']) await send(`${domain}.enable`);
  await send('Page.navigate', { url: address });
  for (let k = 0; k < 100 && !(await ask("document.documentElement?.dataset.ready === 'yes'")); k++) await new Promise((done) => setTimeout(done, 50));
  check('the page becomes ready', await ask("document.documentElement?.dataset.ready === 'yes'"));
  const ready = await ask("performance.getEntriesByType('navigation')[0].domContentLoadedEventEnd");
  console.log(`     size ${(statSync(page).size / 1000).toFixed(0)} kB, ready after ${ready.toFixed(0)} ms`);
  await frame();
  await picture('start');

  await ask("document.querySelector('#slider').focus()");
  const before = [await ladder(), await orbital()];
  await press('ArrowRight');
  check('an arrow key moves the levels', (await ladder()) !== before[0]);
  check('the orbital follows', (await orbital()) !== before[1]);
  await press('End');
  check('the last point is reached', await ask("document.querySelector('#slider').value === document.querySelector('#slider').max"));
  check('a screen reader hears the place', (await ask("document.querySelector('#slider').getAttribute('aria-valuetext')")).includes('eV'));

  await ask("document.activeElement.blur(); document.querySelector('#theme').focus()");
  const seen = [];
  for (let k = 0; k < 120; k++) {
    await press('Tab');
    const at = await ask("(() => { const e = document.activeElement; return e === document.body ? '' : e.id || e.getAttribute('class') || e.dataset.row || e.tagName; })()");
    if (!at) break;
    seen.push(at);
  }
  for (const part of ['print', 'slider', 'release', 'csv']) check(`Tab reaches "${part}"`, seen.includes(part));
  check('Tab reaches lines of the figure', seen.some((name) => name.startsWith('line')));

  await press('Escape');
  check('Escape lets go of the line', await ask("document.querySelector('#release').hidden"));
  await ask("document.querySelector('#figure g.line').focus()");
  await press('Enter', 'Enter', '\r');
  const first = [await ask("document.querySelector('#line-title').textContent"), await orbital()];
  check('Enter keeps a line', await ask("!document.querySelector('#release').hidden"), first[0]);
  await ask("[...document.querySelectorAll('#figure g.line')].pop().focus()");
  await press('Enter', 'Enter', '\r');
  check('another line has another orbital', (await orbital()) !== first[1], await ask("document.querySelector('#line-title').textContent"));
  await picture('pinned');

  const rate = await ask(`new Promise((done) => {
    const slider = document.querySelector('#slider'), start = performance.now();
    let frames = 0;
    const step = () => {
      slider.value = String(frames % (Number(slider.max) + 1));
      slider.dispatchEvent(new Event('input'));
      frames += 1;
      if (performance.now() - start < 2000) requestAnimationFrame(step);
      else done(frames / (performance.now() - start) * 1000);
    };
    requestAnimationFrame(step);
  })`);
  console.log(`     dragging: ${rate.toFixed(0)} frames/s`);

  await ask("document.querySelector('#theme').click()");
  await frame();
  check('there is a dark look', await ask("getComputedStyle(document.body).backgroundColor === 'rgb(20, 24, 29)'"));
  await picture('dark');
  await ask("document.querySelector('#theme').click()");

  const nameless = await ask("[...document.querySelectorAll('button, input, select, canvas, [role=button], [role=img], [role=region]')].filter((e) => e.getClientRects().length && !(e.getAttribute('aria-label') || e.getAttribute('aria-labelledby') || e.textContent.trim() || e.labels?.length)).map((e) => e.id || e.tagName).join(' ')");
  check('every control has a name', nameless === '', nameless);
  await send('Emulation.setDeviceMetricsOverride', { width: 390, height: 844, deviceScaleFactor: 2, mobile: true });
  await frame();
  check('nothing sticks out on a telephone', await ask('document.documentElement.scrollWidth <= innerWidth'), await ask('`${document.documentElement.scrollWidth} of ${innerWidth} px`'));
  await picture('telephone');
  await send('Emulation.clearDeviceMetricsOverride');
  await send('Emulation.setEmulatedMedia', { media: 'print' });
  await frame();
  check('print leaves the controls out', await ask("getComputedStyle(document.querySelector('#slider')).display === 'none'"));
  await picture('print');
  await send('Emulation.setEmulatedMedia', { media: '' });

  check('no error on the console', complaints.length === 0, complaints.join('; '));
  const outside = requests.filter((url) => url !== address && !/^(blob|data):/.test(url));
  check('no request', outside.length === 0, outside.join(' '));

  await send('Emulation.setScriptExecutionDisabled', { value: true });
  await send('Page.reload');
  let nodeIds = [];
  for (let k = 0; k < 40 && nodeIds.length === 0; k++) {
    await new Promise((done) => setTimeout(done, 250));
    const { root } = await send('DOM.getDocument', { depth: -1 });
    ({ nodeIds } = await send('DOM.querySelectorAll', { nodeId: root.nodeId, selector: '#figure svg .line' }));
  }
  await new Promise((done) => setTimeout(done, 500));
  await picture('static');
  check('the figure stands without script', nodeIds.length > 0, `${nodeIds.length} lines`);
} finally {
  browser.kill();
}
process.exit(failed ? 1 : 0);
