import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import type { Browser, BrowserContextOptions, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { deriveReportModel } from '../../src/report/deriveReportModel.js';
import { indexCard } from '../../src/report/indexCard.js';
import { renderHtml } from '../../src/report/renderHtml.js';
import { renderIndex } from '../../src/report/renderIndex.js';
import { buildReportInput, type FixtureSettings } from '../report/buildReportInput.js';
import { hasBrowser, openBrowser } from './browser.js';

const axeSource = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');
const cases: Record<string, FixtureSettings> = {
  empty: { points: 0 },
  'one-point': { points: 1 },
  '300-point': { points: 300 },
  flagged: { points: 24, hasFlags: true },
  'hostile-title': { points: 6, text: '"><img src=x onerror=alert(1)><script>alert(2)</script>', hasFlags: true },
};
const folder = mkdtempSync(join(tmpdir(), 'report-page-'));
const pathOf = (name: string) => join(folder, `${name}.html`);
let browser: Browser;

beforeAll(async () => {
  if (!hasBrowser) return;
  for (const [name, settings] of Object.entries(cases))
    writeFileSync(pathOf(name), renderHtml(deriveReportModel(buildReportInput(settings))));
  const card = (settings: FixtureSettings) =>
    indexCard(buildReportInput(settings).series, [Buffer.from('a run')], undefined, 0.98);
  writeFileSync(pathOf('index'), renderIndex(Object.values(cases).map(card), '2026-03-15T04:10:00Z'));
  browser = await openBrowser();
});
afterAll(async () => {
  await browser?.close();
  rmSync(folder, { recursive: true, force: true });
});

/** Opens a page with the network away; gathers everything it asks for and every complaint. */
async function open(
  name: string,
  options: BrowserContextOptions = {},
): Promise<{ page: Page; asked: string[]; complaints: string[] }> {
  const context = await browser.newContext({ offline: true, ...options });
  const page = await context.newPage();
  const asked: string[] = [];
  const complaints: string[] = [];
  page.on('request', (request) => asked.push(request.url()));
  page.on('pageerror', (error) => complaints.push(error.message));
  page.on('console', (message) => complaints.push(message.text()));
  page.on('dialog', (dialog) => void dialog.dismiss().then(() => complaints.push('a dialog')));
  await page.goto(pathToFileURL(pathOf(name)).href);
  return { page, asked, complaints };
}

async function axeFaults(page: Page): Promise<string[]> {
  // Evaluated by the test's own connection, which the content policy of the page does not bind.
  await page.evaluate(axeSource);
  const result = await page.evaluate(async () => {
    const { axe } = globalThis as unknown as { axe: { run(where: unknown, options: object): Promise<{ violations: object[] }> } };
    return axe.run((globalThis as unknown as { document: unknown }).document, {
      resultTypes: ['violations'],
      runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'],
    });
  });
  return (result.violations as { id: string; nodes: { html: string; failureSummary: string }[] }[]).map(
    ({ id, nodes }) => `${id}: ${nodes[0]?.html.slice(0, 160)} ${nodes[0]?.failureSummary.slice(0, 200)}`,
  );
}

describe.skipIf(!hasBrowser)('in a real browser, offline', () => {
  test.each([...Object.keys(cases), 'index'])(
    'the %s page has no fault by WCAG 2.2 AA, light and dark, contrast included',
    async (name) => {
      for (const colorScheme of name === '300-point' ? (['dark'] as const) : (['light', 'dark'] as const)) {
        const { page, asked, complaints } = await open(name, { colorScheme });
        expect(await axeFaults(page)).toEqual([]);
        expect(complaints).toEqual([]);
        expect(asked).toEqual([page.url()]);
        await page.context().close();
      }
    },
  );

  test.each(Object.keys(cases))('the %s page fits 320 px without scrolling sideways', async (name) => {
    const { page } = await open(name, { viewport: { width: 320, height: 700 } });
    const widths = await page.evaluate('[document.documentElement.scrollWidth, innerWidth]');
    expect((widths as number[])[0]).toBeLessThanOrEqual((widths as number[])[1]!);
    await page.context().close();
  });

  test('without script every table, drawing and sentence is there', async () => {
    const { page } = await open('flagged', { javaScriptEnabled: false });
    const html = await page.content();
    const count = (pattern: RegExp) => html.split(pattern).length - 1;
    expect(count(/<table/)).toBeGreaterThan(5);
    expect(count(/<svg xmlns/)).toBeGreaterThan(6);
    expect(await page.locator('h1').count()).toBe(1);
    expect(await page.locator('h1').isVisible()).toBe(true);
    expect(await page.locator('#points tbody tr').count()).toBe(24);
    await page.context().close();
  });

  test('a page of 300 points is under 5 MB and loads in under 2 s', async () => {
    expect(readFileSync(pathOf('300-point')).length).toBeLessThan(5e6);
    // By the page's own clock, from the start of its navigation; the best of three, for a busy machine.
    const times: number[] = [];
    for (let k = 0; k < 3; k += 1) {
      const { page } = await open('300-point');
      await page.locator('.viewer svg path').first().waitFor();
      times.push((await page.evaluate("performance.getEntriesByType('navigation')[0].loadEventEnd")) as number);
      await page.context().close();
    }
    expect(Math.min(...times)).toBeGreaterThan(0);
    expect(Math.min(...times)).toBeLessThan(2000);
  });

  test('a reader chooses a time point, sees its fit, zooms in and comes back', async () => {
    const { page } = await open('flagged');
    const viewer = page.locator('.viewer');
    await viewer.getByRole('combobox').first().selectOption('0');
    await viewer.getByRole('combobox').last().selectOption({ label: 'ester/OCH2' });
    expect(await viewer.locator('svg path').count()).toBe(2);
    expect(await viewer.locator('p').first().textContent()).toContain('ester/OCH2: singlet as expected');
    const first = () => viewer.locator('svg text').first().textContent();
    const whole = await first();
    await viewer.locator('svg').scrollIntoViewIfNeeded();
    const box = (await viewer.locator('svg').boundingBox())!;
    await page.mouse.move(box.x + box.width * 0.4, box.y + 50);
    await page.mouse.down();
    await page.mouse.move(box.x + box.width * 0.6, box.y + 60);
    await page.mouse.up();
    expect(await first()).not.toBe(whole);
    await viewer.getByRole('button', { name: 'Whole range' }).click();
    expect(await first()).toBe(whole);
    await page.context().close();
  });

  test('sorting, per cent and the values at a marker work, and no digit is lost', async () => {
    const { page } = await open('flagged');
    const column = (index: number) => page.locator(`#points tbody tr > *:nth-child(${index + 1})`).allTextContents();
    const before = await column(2);
    await page.getByRole('button', { name: /per cent/ }).click();
    const shown = await column(2);
    expect(shown[3]!.replace('.', '').replace(/^0+/, '')).toBe(before[3]!.replace('.', '').replace(/^0+/, ''));
    expect(Number(shown[3])).toBeCloseTo(100 * Number(before[3]), 6);
    await page.getByRole('button', { name: /^elapsed/ }).click();
    await page.getByRole('button', { name: /^elapsed/ }).click();
    expect((await column(0))[0]).toBe('tp-023.jdx');
    await page.locator('#conversion [data-tip]').nth(4).hover();
    expect(await page.locator('.tip').textContent()).toMatch(/min: \d+\.\d+ % \(u 0\.11 %\)/);
    await page.context().close();
  });

  test('the page of all runs looks again by itself while a run is live', async () => {
    const plain = await open('index', { javaScriptEnabled: false });
    expect(await plain.page.content()).toContain('<meta http-equiv="refresh" content="60">');
    await plain.page.context().close();
    const { page } = await open('index');
    await page.clock.install();
    await page.reload();
    await page.getByRole('button', { name: 'Stop looking again' }).click();
    let loads = 0;
    page.on('load', () => {
      loads += 1;
    });
    await page.clock.fastForward(120_000);
    expect(loads).toBe(0);
    await page.getByRole('button', { name: 'Look again by itself' }).click();
    const loaded = page.waitForEvent('load');
    await page.clock.fastForward(61_000);
    await loaded;
    await page.context().close();
  });
});
