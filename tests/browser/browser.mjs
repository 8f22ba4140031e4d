// Drives Chromium over its debugging pipe; no package is needed for that.
import { spawn } from 'node:child_process';
import { readFileSync, readdirSync } from 'node:fs';

const CODES = { Tab: 9, Enter: 13, ' ': 32, ArrowRight: 39, ArrowLeft: 37, Home: 36, End: 35, Escape: 27 };

export async function open(profile) {
  const browser = spawn('chromium', [
    '--headless', '--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking',
    '--disable-component-update', '--disable-sync', `--user-data-dir=${profile}`, '--remote-debugging-pipe',
    '--window-size=1280,1500', 'about:blank',
  ], { stdio: ['ignore', 'ignore', 'ignore', 'pipe', 'pipe'] });
  let next = 1, unread = '', session;
  const waiting = new Map(), complaints = [], requests = [];
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
  function send(method, params = {}) {
    const id = next++;
    browser.stdio[3].write(`${JSON.stringify({ id, method, params, sessionId: session })}\0`);
    return new Promise((resolve, reject) => waiting.set(id, { resolve, reject }));
  }
  async function ask(expression) {
    const { result, exceptionDetails } = await send('Runtime.evaluate', { expression, returnByValue: true, awaitPromise: true });
    if (exceptionDetails) throw new Error(`${expression.slice(0, 200)}: ${exceptionDetails.exception?.description}`);
    return result.value;
  }
  const frame = () => ask('new Promise((done) => requestAnimationFrame(() => requestAnimationFrame(() => done(1))))');
  async function press(key, text) {
    const params = { key, code: key === ' ' ? 'Space' : key, windowsVirtualKeyCode: CODES[key], text };
    await send('Input.dispatchKeyEvent', { type: text ? 'keyDown' : 'rawKeyDown', ...params });
    await send('Input.dispatchKeyEvent', { type: 'keyUp', ...params });
    await frame();
  }
  async function go(address) {
    await send('Page.navigate', { url: address });
    for (let k = 0; k < 200; k++) {
      if (await ask("document.documentElement?.dataset.ready === 'yes'")) return true;
      await new Promise((done) => setTimeout(done, 50));
    }
    return false;
  }
  async function shot(options = {}) {
    const { data } = await send('Page.captureScreenshot', { format: 'png', captureBeyondViewport: true, ...options });
    return Buffer.from(data, 'base64');
  }
  // Processor time of the browser and all processes below it, ms.
  function cpu() {
    const times = new Map(), parents = new Map();
    for (const pid of readdirSync('/proc').filter((name) => /^\d+$/.test(name))) {
      try {
        const text = readFileSync(`/proc/${pid}/stat`, 'utf8'), fields = text.slice(text.lastIndexOf(')') + 2).split(' ');
        parents.set(Number(pid), Number(fields[1]));
        times.set(Number(pid), 10 * (Number(fields[11]) + Number(fields[12])));
      } catch { /* it has ended meanwhile */ }
    }
    let sum = 0;
    for (const [pid, time] of times) {
      for (let at = pid; at; at = parents.get(at)) if (at === browser.pid) { sum += time; break; }
    }
    return sum;
  }
  const { targetId } = await send('Target.createTarget', { url: 'about:blank' });
  session = (await send('Target.attachToTarget', { targetId, flatten: true })).sessionId;
  for (const domain of ['Page', 'Runtime', 'Log', 'Network', 'DOM']) await send(`${domain}.enable`);
  return { send, ask, frame, press, go, shot, cpu, complaints, requests, close: () => browser.kill() };
}
