import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { type Browser, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { collectComplaints, openBrowser } from '../support/browser.js';
import { openWindow, signIn } from '../support/product.js';
import { lumpyBody } from '../support/planning-shapes.js';
import { toSoup } from '../support/shapes.js';
import { binaryStl } from '../support/stl-files.js';

const url = inject('productUrl');
const screens = join(new URL('../..', import.meta.url).pathname, 'dist', 'test', 'screens');

let browser: Browser;
beforeAll(async () => {
  browser = await openBrowser();
  mkdirSync(screens, { recursive: true });
});
afterAll(() => browser.close());

async function shoot(page: Page, name: string): Promise<void> {
  writeFileSync(join(screens, `${name}.png`), await page.screenshot({ fullPage: true }));
}

async function upload(page: Page, name: string): Promise<void> {
  const bytes = binaryStl(toSoup(lumpyBody(150, 8, 6)));
  const chooser = page.waitForEvent('filechooser');
  await page.getByRole('button', { name: 'Upload models' }).click();
  await (
    await chooser
  ).setFiles({ name: `${name}.stl`, mimeType: 'model/stl', buffer: Buffer.from(bytes) });
  await page.getByRole('link', { name, exact: true }).first().click();
  await page.getByRole('button', { name: 'Make a plan' }).waitFor({ timeout: 120_000 });
}

describe('what is asked of a plan', () => {
  it('is chosen on the model’s page, kept by the plan, and other plans of the search can be made', async () => {
    const context = await openWindow(browser, { width: 1440, height: 1000, theme: 'light' });
    const page = await context.newPage();
    const complaints = collectComplaints(page);
    await signIn(page, url, 'Designer');
    await upload(page, 'pebble');

    const preset = page.getByRole('combobox', { name: 'What matters most' });
    await preset.click();
    await page.getByRole('option', { name: 'Clean printing' }).click();
    const fewer = page.getByRole('slider', { name: 'Fewer pieces' });
    await expect.poll(() => fewer.inputValue()).toBe('0.4');
    await fewer.press('ArrowRight');
    await expect.poll(() => fewer.inputValue()).toBe('0.45');
    await expect.poll(() => preset.textContent()).toContain('Own mixture');
    await page.getByRole('button', { name: 'Front', exact: true }).click();
    await page.getByText('My own cuts').click();
    await page.getByRole('button', { name: 'Add a cut' }).click();
    await page.getByRole('spinbutton', { name: 'At' }).fill('12.5');
    await page.getByText('Keep whole', { exact: true }).click();
    await page.getByRole('button', { name: 'Add a zone' }).click();
    await page.getByRole('textbox', { name: 'Name' }).fill('Lettering');
    await page.getByRole('spinbutton', { name: 'Middle z' }).fill('60');
    await shoot(page, 'plan-choices-light-1440');
    for (const [width, theme] of [
      [390, 'light'],
      [390, 'dark'],
      [1440, 'dark'],
    ] as const) {
      await page.setViewportSize({ width, height: 1000 });
      await page.emulateMedia({ colorScheme: theme });
      await page.waitForTimeout(300);
      const overflow = await page.evaluate(
        () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
      );
      expect(overflow, `${width} px`).toBeLessThanOrEqual(0);
      await shoot(page, `plan-choices-${theme}-${width}`);
    }
    await page.setViewportSize({ width: 1440, height: 1000 });
    await page.emulateMedia({ colorScheme: 'light' });
    await page.getByRole('button', { name: 'Make a plan' }).click();
    await page.waitForURL(/\/plans\//);
    const download = page.getByRole('link', { name: /Download ZIP/ });
    await download.waitFor({ timeout: 150_000 });

    const block = page.locator('sw-title-block');
    await expect
      .poll(() => block.textContent())
      .toMatch(/Own mixture; seen from front; 1 zone kept whole; 1 own cut/);
    await expect.poll(() => page.locator('sw-cuts-list').textContent()).toContain('Your own cut');
    await expect
      .poll(() => page.locator('sw-proof-table').textContent())
      .toContain('Keep-whole zones are whole');
    const offers = page.locator('sw-offers-table tbody tr');
    await expect.poll(() => offers.count()).toBeGreaterThan(1);
    await expect.poll(() => page.locator('sw-offers-table .shown').count()).toBe(1);
    await shoot(page, 'plan-offers-light-1440');
    await page.setViewportSize({ width: 390, height: 1000 });
    await page.emulateMedia({ colorScheme: 'dark' });
    await page.waitForTimeout(300);
    await shoot(page, 'plan-offers-dark-390');
    await page.setViewportSize({ width: 1440, height: 1000 });
    await page.emulateMedia({ colorScheme: 'light' });

    const first = page.url();
    await page
      .getByRole('button', { name: /^Make this one/ })
      .first()
      .click();
    await expect.poll(() => page.url()).not.toBe(first);
    await download.waitFor({ timeout: 150_000 });
    await expect.poll(() => block.textContent()).toMatch(/Found by.*the search of plan 1/);
    await expect.poll(() => page.locator('sw-proof-table').textContent()).not.toContain('failed');
    expect(complaints).toEqual([]);
    await context.close();
  });

  it('need not be waited for: the best so far is taken', async () => {
    const context = await openWindow(browser, { width: 1440, height: 1000, theme: 'light' });
    const page = await context.newPage();
    await signIn(page, url, 'Designer');
    await upload(page, 'hasty pebble');
    await page.getByRole('button', { name: 'Make a plan' }).click();
    await page.waitForURL(/\/plans\//);
    await page.getByText(/\d+ pieces so far/).waitFor({ timeout: 60_000 });
    await shoot(page, 'plan-searching-light-1440');
    await page.getByRole('button', { name: 'Take the best so far' }).click();
    await page.getByRole('link', { name: /Download ZIP/ }).waitFor({ timeout: 60_000 });
    await expect.poll(() => page.locator('sw-parts-list tbody tr').count()).toBeGreaterThan(1);
    await context.close();
  });
});
