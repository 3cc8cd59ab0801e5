import { execFileSync } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { deflateSync } from 'node:zlib';
import { type BrowserContext, chromium, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { pageAssets } from '../../src/io/page-assets.js';
import { mapPage } from '../../src/picture/page-html.js';
import { madeStorm } from './invented.js';
import { pageInputOf } from './page-input.js';

const BROWSER = ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome'].find((path) =>
  existsSync(path),
);
if (!BROWSER) console.warn('no Chromium on this machine: the tests of the page in a browser are SKIPPED');

const FLAGS = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];
const EVIL = '<img src=x onerror=alert(1)>';

describe.skipIf(!BROWSER)('page in a browser', () => {
  const folder = mkdtempSync(join(tmpdir(), 'galewake-page-'));
  let context: BrowserContext;
  let page: Page;
  const requests: string[] = [];
  const troubles: string[] = [];
  const storm = madeStorm('antimeridian', EVIL);

  beforeAll(async () => {
    execFileSync(process.execPath, [fileURLToPath(new URL('../../scripts/build/page.js', import.meta.url))]);
    const html = await mapPage(pageInputOf(storm), { deflate: (bytes) => deflateSync(bytes), assets: pageAssets() });
    expect(html.length).toBeLessThan(2_000_000);
    writeFileSync(join(folder, 'map.html'), html);
    context = await chromium.launchPersistentContext(join(folder, 'profile'), {
      executablePath: BROWSER!,
      headless: true,
      args: FLAGS,
      viewport: { width: 1200, height: 850 },
      colorScheme: 'light',
    });
    page = await context.newPage();
    page.on('request', (request) => requests.push(request.url()));
    page.on('pageerror', (error) => troubles.push(String(error)));
    page.on('console', (message) => {
      if (message.type() === 'error') troubles.push(message.text());
    });
    page.on('dialog', (dialog) => {
      troubles.push(`dialog: ${dialog.message()}`);
      void dialog.dismiss();
    });
    await page.goto(pathToFileURL(join(folder, 'map.html')).href);
    await page
      .waitForFunction(() => document.documentElement.dataset['ready'] === 'yes')
      .catch((cause) => {
        throw new Error(`the page did not get ready: ${troubles.join('; ')}`, { cause });
      });
  }, 120_000);

  afterAll(async () => {
    await context?.close();
    rmSync(folder, { recursive: true, force: true });
  });

  /** A picture of the map's pixels, to see whether it changed. */
  const mapPixels = (): Promise<string> =>
    page.evaluate(async () => {
      await new Promise((done) => setTimeout(done, 350));
      return (document.getElementById('map') as HTMLCanvasElement).toDataURL();
    });
  const reading = async (): Promise<string> => (await page.locator('#reading').textContent()) ?? '';

  it('shows the peak that the summary states', async () => {
    const { windMps } = storm.input.peak!;
    expect(await page.locator('#peak-wind').textContent()).toBe(`${windMps.toFixed(1)} m/s`);
    expect(Number(await page.locator('#peak-wind').getAttribute('data-mps'))).toBe(windMps);
    await page.click('#to-peak');
    expect(await reading()).toContain(`Peak wind${windMps.toFixed(1)} m/s`);
  });

  it('draws a map and nothing is wrong', async () => {
    const colours = await page.evaluate(() => {
      const map = document.getElementById('map') as HTMLCanvasElement;
      const { data } = map.getContext('2d')!.getImageData(0, 0, map.width, map.height);
      const seen = new Set<number>();
      for (let i = 0; i < data.length; i += 4) seen.add((data[i]! << 16) | (data[i + 1]! << 8) | data[i + 2]!);
      return seen.size;
    });
    expect(colours).toBeGreaterThan(200);
  });

  it('takes names as text', async () => {
    expect(await page.locator('h1').textContent()).toBe(EVIL);
    expect(await page.locator('img').count()).toBe(0);
    expect(await page.locator('#own button').textContent()).toBe('Halse <b>bold</b>');
    expect(await page.locator('#own b, #cautions i').count()).toBe(0);
  });

  it('computes the wind of a moment with the same engine', async () => {
    const [fix] = storm.track.fixes.slice(1);
    await page.fill('#lat', String(fix!.latDeg + 0.4));
    await page.fill('#lon', String(fix!.lonDeg));
    await page.click('#read');
    await page.locator('#ruler').focus();
    await page.keyboard.press('Home');
    for (let i = 0; i < 2; i++) await page.keyboard.press('PageUp');
    const expected = storm.model.windAt({ latDeg: fix!.latDeg + 0.4, lonDeg: fix!.lonDeg }, fix!.timeMs);
    expect(expected.speedMps).toBeGreaterThan(20);
    expect(await page.locator('#moment').textContent()).toContain('3 Sep 12:00 UTC');
    expect(await reading()).toContain(`Wind now${expected.speedMps.toFixed(1)} m/s`);
    expect(await page.locator('#ruler').getAttribute('aria-valuetext')).toBe('3 Sep 12:00 UTC');
  });

  it('plays, pauses and goes back to the whole storm', async () => {
    const before = await page.locator('#moment').textContent();
    await page.click('#play');
    await page.waitForFunction((text) => document.getElementById('moment')!.textContent !== text, before);
    const one = await mapPixels();
    expect(await mapPixels()).not.toBe(one);
    expect(await page.locator('#play').textContent()).toBe('Pause');
    await page.click('#play');
    const still = await page.locator('#moment').textContent();
    expect(await mapPixels()).toBe(await mapPixels());
    expect(await page.locator('#moment').textContent()).toBe(still);
    await page.click('#whole');
    expect(await page.locator('#moment').textContent()).toContain('whole storm');
    expect(await page.locator('input[value=wind]').isChecked()).toBe(true);
  });

  it('answers to the keyboard', async () => {
    await page.click('#to-peak');
    await page.locator('#map').focus();
    const at = await reading();
    await page.keyboard.press('ArrowRight');
    expect(await reading()).not.toBe(at);
    const far = await mapPixels();
    await page.keyboard.press('+');
    const near = await mapPixels();
    expect(near).not.toBe(far);
    await page.keyboard.press('Shift+ArrowLeft');
    expect(await mapPixels()).not.toBe(near);
    await page.keyboard.press('0');
    expect(await mapPixels()).toBe(far);
    // every control is reached by Tab
    const reached = new Set<string>();
    await page.locator('#theme').focus();
    for (let i = 0; i < 40; i++) {
      reached.add(await page.evaluate(() => document.activeElement?.id ?? ''));
      await page.keyboard.press('Tab');
    }
    for (const id of [
      'theme',
      'print',
      'map',
      'zoom-in',
      'zoom-out',
      'zoom-all',
      'play',
      'ruler',
      'whole',
      'to-peak',
      'lat',
      'lon',
      'read',
      'bearing',
    ])
      expect(reached, id).toContain(id);
  });

  it('colours the map by each layer, with a legend', async () => {
    const seen = new Set<string>();
    for (const layer of ['wind', 'gust', 'direction', 'time', 'hours0', 'hours1', 'hours2', 'now']) {
      await page.check(`input[value=${layer}]`);
      seen.add(await mapPixels());
      expect(await page.locator('#legend .step').count()).toBeGreaterThan(1);
    }
    expect(seen.size).toBe(8);
    await page.click('#whole');
  });

  it('refuses a place that is none, and says how', async () => {
    await page.fill('#lat', '95');
    await page.click('#read');
    expect(await page.locator('#place-error').textContent()).toContain('latitude');
    await page.fill('#lat', '18.5S');
    await page.fill('#lon', '179,5 W');
    await page.click('#read');
    expect(await page.locator('#place-error').textContent()).toBe('');
    expect(await reading()).toContain('18.50°S 179.50°W');
  });

  it('takes isotachs and own places away and back', async () => {
    const before = await mapPixels();
    await page.locator('#isotachs input').first().uncheck();
    expect(await mapPixels()).not.toBe(before);
    await page.locator('#isotachs input').first().check();
    await page.locator('#own input').uncheck();
    expect(await mapPixels()).not.toBe(before);
    await page.locator('#own input').check();
    expect(await mapPixels()).toBe(before);
  });

  it('names every control for screen readers', async () => {
    const nameless = await page.evaluate(() =>
      [...document.querySelectorAll<HTMLElement>('#app button, #app input, #app [tabindex], #app [role=img]')]
        .filter((one) => {
          const label =
            one.getAttribute('aria-label') ?? (one as HTMLInputElement).labels?.[0]?.textContent ?? one.textContent;
          return !label?.trim();
        })
        .map((one) => one.outerHTML),
    );
    expect(nameless).toEqual([]);
    const tree = await page.locator('#app').ariaSnapshot();
    for (const line of tree.split('\n')) {
      const control = /- (button|radio|checkbox|slider|textbox|application|img)\b(.*)/.exec(line);
      if (control) expect(control[2], line).toMatch(/"[^"]+"|\/.+\//);
    }
    for (const name of [
      'Map of the storm',
      'Moment of the storm',
      'Play',
      'Whole storm',
      'Latitude',
      'Longitude',
      'Peak wind',
      'Bearing',
    ])
      expect(tree).toContain(name);
  });

  it('switches to dark, fits a phone and prints the map', async () => {
    const light = await mapPixels();
    await page.click('#theme');
    expect(await page.evaluate(() => document.documentElement.dataset['theme'])).toBe('dark');
    expect(await mapPixels()).not.toBe(light);
    await page.setViewportSize({ width: 360, height: 740 });
    await page.waitForTimeout(300);
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(360);
    const small = await page.evaluate(
      () =>
        [...document.querySelectorAll<HTMLElement>('#app button')]
          .map((one) => one.getBoundingClientRect())
          .filter((box) => box.height < 36 || box.width < 36).length,
    );
    expect(small).toBe(0);
    await page.emulateMedia({ media: 'print' });
    expect(await page.locator('#app').isVisible()).toBe(false);
    expect(await page.locator('.print-map svg').isVisible()).toBe(true);
    await page.emulateMedia({ media: 'screen' });
  });

  it('asked for nothing, said nothing wrong, and could not ask', async () => {
    expect(
      requests.filter((url) => !url.startsWith('file:') && !url.startsWith('blob:') && !url.startsWith('data:')),
    ).toEqual([]);
    expect(requests.filter((url) => url.startsWith('file:'))).toHaveLength(1);
    expect(troubles).toEqual([]);
    const outcome = await page.evaluate(() =>
      fetch('https://example.org/').then(
        () => 'went out',
        () => 'refused',
      ),
    );
    expect(outcome).toBe('refused');
    const ran = await page.evaluate(() => {
      const script = document.createElement('script');
      script.textContent = 'document.documentElement.dataset.ran = "yes"';
      document.head.append(script);
      return document.documentElement.dataset['ran'] ?? 'no';
    });
    expect(ran).toBe('no');
  });
});
