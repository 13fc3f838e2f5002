import { existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { strFromU8, unzipSync } from 'fflate';
import { type Browser, type Locator, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { type AdmeshFindings, askAdmesh, hasAdmesh } from '../support/admesh.js';
import { collectComplaints, openBrowser } from '../support/browser.js';
import { openWindow, signIn } from '../support/product.js';
import { torusKnot, toSoup } from '../support/shapes.js';
import { binaryStl } from '../support/stl-files.js';
import { measureBinaryStl } from '../support/written-pieces.js';

const url = inject('productUrl');
const root = new URL('../..', import.meta.url).pathname;
const openMeshes = join(root, '..', 'shared', 'meshes', 'stl');
const screens = join(root, 'dist', 'test', 'screens');

/** Real files: one made here everywhere, and open meshes where they are at hand. */
const models = [
  { name: 'knot', bytes: () => knotStl() },
  { name: 'o01_spot', bytes: () => readFileSync(join(openMeshes, 'o01_spot.stl')) },
].filter((model) => model.name === 'knot' || existsSync(join(openMeshes, `${model.name}.stl`)));

/** A knotted tube about 500 mm wide, in millimetres. */
function knotStl(): Uint8Array {
  return binaryStl(toSoup(torusKnot(75, 28, 240, 32)));
}

/** Share of pixels of the canvas that are not its most common colour, and the pixels themselves. */
async function look(canvas: Locator): Promise<{ drawnShare: number; pixels: Buffer }> {
  const pixels = await canvas.screenshot();
  const drawnShare = await canvas.page().evaluate(async (base64) => {
    const image = new Image();
    image.src = `data:image/png;base64,${base64}`;
    await image.decode();
    const sheet = new OffscreenCanvas(image.width, image.height);
    const context = sheet.getContext('2d')!;
    context.drawImage(image, 0, 0);
    const { data } = context.getImageData(0, 0, image.width, image.height);
    const counts = new Map<number, number>();
    for (let i = 0; i < data.length; i += 4) {
      const colour = (data[i]! << 16) | (data[i + 1]! << 8) | data[i + 2]!;
      counts.set(colour, (counts.get(colour) ?? 0) + 1);
    }
    return 1 - Math.max(...counts.values()) / (data.length / 4);
  }, pixels.toString('base64'));
  return { drawnShare, pixels };
}

/** What admesh, an independent checker, says about a file as it came out of the ZIP. */
function judge(stl: Uint8Array): AdmeshFindings {
  const folder = mkdtempSync(join(tmpdir(), 'sw-admesh-'));
  try {
    writeFileSync(join(folder, 'piece.stl'), stl);
    return askAdmesh(join(folder, 'piece.stl'));
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

async function uploadModel(page: Page, name: string, bytes: Uint8Array): Promise<void> {
  const chooser = page.waitForEvent('filechooser');
  await page.getByRole('button', { name: 'Upload models' }).click();
  await (
    await chooser
  ).setFiles({ name: `${name}.stl`, mimeType: 'model/stl', buffer: Buffer.from(bytes) });
  await page.getByRole('link', { name, exact: true }).first().click();
  await page.getByRole('button', { name: 'Make a plan' }).waitFor({ timeout: 120_000 });
}

describe.each(models)('the main job with $name', ({ name, bytes }) => {
  let browser: Browser;
  beforeAll(async () => {
    browser = await openBrowser();
    mkdirSync(screens, { recursive: true });
  });
  afterAll(async () => browser.close());

  it('uploads, plans, shows and downloads pieces that are closed, fit and add up', async () => {
    const file = bytes();
    const model = measureBinaryStl(file);
    const context = await openWindow(browser, { width: 1440, height: 1000, theme: 'light' });
    const page = await context.newPage();
    const complaints = collectComplaints(page);
    await signIn(page, url, 'Designer');
    await uploadModel(page, name, file);

    await page.getByRole('combobox', { name: 'Envelope' }).click();
    await page.getByRole('option', { name: /220\s*×\s*220\s*×\s*250/ }).click();
    await page.getByRole('button', { name: 'Make a plan' }).click();
    await page.waitForURL(/\/plans\//);
    const download = page.getByRole('link', { name: /Download ZIP/ });
    await download.waitFor({ timeout: 150_000 });

    const canvas = page.locator('sw-viewer canvas');
    await expect.poll(async () => (await look(canvas)).drawnShare).toBeGreaterThan(0.02);
    await page.getByRole('radio', { name: 'Assembled' }).click();
    await page.waitForTimeout(400);
    const assembled = await look(canvas);
    await page.getByRole('slider', { name: /Spread/ }).fill('80');
    await expect.poll(async () => (await look(canvas)).pixels.equals(assembled.pixels)).toBe(false);
    const rows = page.locator('sw-parts-list tbody tr');
    const pieceCount = await rows.count();
    expect(pieceCount).toBeGreaterThan(1);
    const second = page.getByRole('button', { name: 'P02', exact: true });
    await second.click();
    await expect.poll(async () => second.getAttribute('aria-pressed')).toBe('true');
    writeFileSync(join(screens, `main-job-${name}.png`), await page.screenshot({ fullPage: true }));

    const arriving = page.waitForEvent('download');
    await download.click();
    const path = await (await arriving).path();
    const entries = unzipSync(new Uint8Array(readFileSync(path)));
    const stls = Object.entries(entries).filter(([entry]) => entry.endsWith('.stl'));
    const pieces = stls.filter(([entry]) => entry.startsWith('pieces/'));
    expect(pieces).toHaveLength(pieceCount);
    const manifest = JSON.parse(strFromU8(entries['manifest.json']!)) as {
      pieces: unknown[];
      parts: { file: string | null }[];
      proof: { check: string; measured: string; passed: boolean }[];
    };
    const partFiles = manifest.parts.flatMap(({ file }) => file ?? []);
    expect(stls.map(([entry]) => entry).filter((entry) => !entry.startsWith('pieces/'))).toEqual(
      partFiles,
    );
    expect(manifest.pieces).toHaveLength(pieceCount);
    expect(strFromU8(entries['cut-list.csv']!).trim().split(/\r?\n/)).toHaveLength(pieceCount + 1);

    let sum = 0;
    for (const [entry, stl] of pieces) {
      const piece = measureBinaryStl(stl);
      sum += piece.volumeMm3;
      const [x, y, z] = piece.size;
      expect(Math.max(x, y), entry).toBeLessThanOrEqual(220 + 1e-3);
      expect(z, entry).toBeLessThanOrEqual(250 + 1e-3);
      if (hasAdmesh()) expect(judge(stl), entry).toEqual({ disconnectedFacets: 0, parts: 1 });
    }
    // What sockets, marks and bevels took away stands in the proof.
    const row = manifest.proof.find(({ check }) => check === 'Volumes add up to the model')!;
    const took = Number(/joints and marks (-?[\d.]+) mm³/.exec(row.measured)?.[1]);
    expect(took).toBeLessThan(0);
    expect(Math.abs(sum - model.volumeMm3 - took) / model.volumeMm3).toBeLessThan(1e-6);
    expect(manifest.proof.filter(({ passed }) => !passed)).toEqual([]);
    expect(complaints).toEqual([]);
    await context.close();
  });
});
