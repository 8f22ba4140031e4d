// The upper part of a page as a picture: `node picture.mjs PROFILE PAGE.html OUT.png`.
import { writeFileSync } from 'node:fs';
import { pathToFileURL } from 'node:url';
import { open } from './browser.mjs';

const [profile, page, out] = process.argv.slice(2);
const browser = await open(profile);
try {
  await browser.send('Emulation.setDeviceMetricsOverride', { width: 1240, height: 820, deviceScaleFactor: 1, mobile: false });
  await browser.send('Emulation.setScrollbarsHidden', { hidden: true });
  await browser.go(pathToFileURL(page).href);
  await new Promise((done) => setTimeout(done, 1500));
  writeFileSync(out, await browser.shot({ captureBeyondViewport: false }));
} finally {
  browser.close();
}
process.exit(0);
