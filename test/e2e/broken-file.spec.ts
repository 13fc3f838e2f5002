import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { type Browser, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import {
  accessibilityViolations,
  collectComplaints,
  horizontalOverflow,
  openBrowser,
} from '../support/browser.js';
import { openWindow, signIn } from '../support/product.js';
import { box, join as joinShapes, toSoup, turnInsideOut } from '../support/shapes.js';
import { binaryStl } from '../support/stl-files.js';
import { meshObject, modelXml, threeMfFile } from '../support/threemf-files.js';

const url = inject('productUrl');
const screens = join(new URL('../..', import.meta.url).pathname, 'dist', 'test', 'screens');

/** A casing of 300 × 200 × 150 mm with walls of 3 mm, whose outer bottom is missing. */
function openCasing(): TriangleMesh {
  const outer = box([0, 0, 0], [300, 200, 150]).mesh;
  const isBottom = (triangle: number) =>
    [0, 1, 2].every((k) => outer.positions[3 * outer.indices[3 * triangle + k]! + 2] === 0);
  const indices = outer.indices.filter((_, i) => !isBottom(Math.floor(i / 3)));
  const inner = turnInsideOut(box([3, 3, 3], [297, 197, 147]).mesh);
  return joinShapes([{ positions: outer.positions, indices }, inner]);
}

async function upload(page: Page, name: string, bytes: Uint8Array): Promise<void> {
  await page.goto(`${url}/models`);
  const chooser = page.waitForEvent('filechooser');
  await page.getByRole('button', { name: 'Upload models' }).click();
  await (
    await chooser
  ).setFiles({ name, mimeType: 'application/octet-stream', buffer: Buffer.from(bytes) });
  const link = page.getByRole('link', { name: name.replace(/\.\w+$/, ''), exact: true });
  await link.first().click();
  await page.locator('sw-mesh-note').waitFor({ timeout: 60_000 });
}

const text = (page: Page, selector: string) =>
  page
    .locator(selector)
    .innerText()
    .then((words) => words.replace(/\s+/g, ' '));

describe('a broken file', () => {
  let browser: Browser;
  beforeAll(async () => {
    browser = await openBrowser();
    mkdirSync(screens, { recursive: true });
  });
  afterAll(async () => browser.close());

  it('is told about, mended as the person decides, measured and offered for planning', async () => {
    const context = await openWindow(browser, { width: 1440, height: 1000, theme: 'light' });
    const page = await context.newPage();
    const complaints = collectComplaints(page);
    await signIn(page, url, 'Designer');
    await upload(page, 'open-casing.stl', binaryStl(toSoup(openCasing())));
    const address = page.url();

    expect(await text(page, 'sw-mesh-note')).toContain('4 edges with a facet on one side only');
    await page.getByRole('heading', { name: 'What to decide' }).waitFor();
    expect(await page.getByRole('button', { name: 'Make a plan' }).count()).toBe(0);
    const canvas = page.locator('sw-viewer canvas');
    await expect
      .poll(async () => Number(await page.locator('sw-viewer').getAttribute('data-drawn')))
      .toBeGreaterThan(0);
    const before = await canvas.screenshot();
    await page.getByRole('button', { name: /Hole 1: rim 1 000 mm, 4 edges, flat, open/ }).click();
    await expect.poll(async () => (await canvas.screenshot()).equals(before)).toBe(false);
    await page.locator('.sw-viewer-place').waitFor();
    writeFileSync(join(screens, 'broken-hole.png'), await page.screenshot({ fullPage: true }));

    await page.getByRole('button', { name: 'Fill 1 hole' }).click();
    await page.getByRole('button', { name: 'Make a plan' }).waitFor({ timeout: 60_000 });
    const note = await text(page, 'sw-mesh-note');
    expect(note).toContain('1 hole was filled with 2 facets.');
    expect(note).toContain('Mended, it holds one closed solid with one hollow inside.');
    // 300 × 200 × 150 less 294 × 194 × 144 mm.
    expect(note).toMatch(/Volume .* 787 cm³/);
    expect(await text(page, 'sw-wall-chart')).toContain('Usual wall 3.00 mm');
    await page.getByRole('switch', { name: 'Colour by wall thickness' }).click();
    await page.locator('sw-wall-legend').waitFor();
    writeFileSync(join(screens, 'broken-mended.png'), await page.screenshot({ fullPage: true }));

    const parts = threeMfFile(
      modelXml(
        meshObject(1, box([0, 0, 0], [30, 20, 16]).mesh, 'name="Casing"') +
          meshObject(2, box([0, 0, 0], [5, 5, 5]).mesh, 'name="Foot"'),
        '<item objectid="1"/><item objectid="2" transform="1 0 0 0 1 0 0 0 1 40 0 0"/>',
        { unit: 'centimeter' },
      ),
    );
    const chooser = page.waitForEvent('filechooser');
    await page.getByRole('button', { name: 'Upload a new revision' }).click();
    await (
      await chooser
    ).setFiles({ name: 'casing-2.3mf', mimeType: 'model/3mf', buffer: Buffer.from(parts) });
    await page.getByRole('heading', { name: 'Revisions' }).waitFor({ timeout: 60_000 });
    expect(await text(page, 'sw-mesh-note')).toContain('A 3MF file');
    expect(await text(page, 'sw-mesh-note')).toContain('in 2 parts, unit centimeter');
    await expect
      .poll(async () => text(page, 'sw-revision-list'))
      .toContain('Against revision 1: size x +150.0 mm, z +10.0 mm');
    await page.getByText('2 parts in the file').click();
    await page.getByRole('checkbox', { name: /^Foot/ }).uncheck();
    await page.getByRole('button', { name: 'Use only these parts' }).click();
    await expect
      .poll(async () => text(page, 'sw-revision-list'), { timeout: 60_000 })
      .toContain('Against revision 1: size z +10.0 mm');
    expect(page.url()).toBe(address);
    expect(complaints).toEqual([]);
    await context.close();
  });

  it('that mending changes is planned only after it was taken', async () => {
    const context = await openWindow(browser, { width: 1440, height: 900, theme: 'dark' });
    const page = await context.newPage();
    await signIn(page, url, 'Designer');
    const pair = joinShapes([
      box([0, 0, 0], [200, 200, 200]).mesh,
      box([100, 100, 100], [300, 300, 300]).mesh,
    ]);
    await upload(page, 'two-blocks.stl', binaryStl(toSoup(pair)));
    expect(await text(page, 'sw-mending-desk')).toContain(
      'Mending made the volume 6.25 % smaller. Is this the shape you meant?',
    );
    expect(await page.getByRole('button', { name: 'Make a plan' }).count()).toBe(0);
    await page.getByRole('button', { name: 'Use this solid' }).click();
    await page.getByRole('button', { name: 'Make a plan' }).waitFor();
    await context.close();
  });

  it.each([
    { width: 1440, height: 900, theme: 'dark' },
    { width: 390, height: 844, theme: 'light' },
    { width: 390, height: 844, theme: 'dark' },
  ] as const)('reads well at $width px, $theme', async (window) => {
    const context = await openWindow(browser, window);
    const page = await context.newPage();
    await signIn(page, url, 'Designer');
    const faults: string[] = [];
    const pair = joinShapes([openCasing(), box([280, 80, 40], [330, 120, 80]).mesh]);
    const name = `casing-${window.width}-${window.theme}`;
    await upload(page, `${name}.stl`, binaryStl(toSoup(pair)));
    for (const state of ['asking', 'mended']) {
      if (state === 'mended') {
        await page.getByRole('button', { name: 'Fill 1 hole' }).click();
        await page.locator('sw-wall-chart').waitFor({ timeout: 60_000 });
      }
      await page.waitForTimeout(600);
      const overflow = await horizontalOverflow(page);
      if (overflow > 0) faults.push(`${state}: ${overflow} px too wide`);
      for (const violation of await accessibilityViolations(page))
        faults.push(`${state}: ${violation}`);
      const file = `broken-${state}-${window.width}-${window.theme}.png`;
      writeFileSync(join(screens, file), await page.screenshot({ fullPage: true }));
    }
    expect(faults).toEqual([]);
    await context.close();
  });
});
