import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { type Browser, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import {
  accessibilityViolations,
  collectComplaints,
  horizontalOverflow,
  openBrowser,
} from '../support/browser.js';
import { openWindow, signIn } from '../support/product.js';

const url = inject('productUrl');
const screens = join(new URL('../..', import.meta.url).pathname, 'dist', 'test', 'screens');

const windows = [
  { width: 1440, height: 900, theme: 'light' },
  { width: 1440, height: 900, theme: 'dark' },
  { width: 390, height: 844, theme: 'light' },
  { width: 390, height: 844, theme: 'dark' },
] as const;

interface Api {
  model: string;
  plan: string;
}

/** A demo model with a finished plan, made through the API by the page's own session. */
async function makePlan(page: Page): Promise<Api> {
  return page.evaluate(async () => {
    const json = async (path: string, init?: RequestInit) => (await fetch(path, init)).json();
    const token = /XSRF-TOKEN=([^;]+)/.exec(document.cookie)?.[1] ?? '';
    const headers = {
      'content-type': 'application/json',
      'X-XSRF-TOKEN': decodeURIComponent(token),
    };
    interface Model {
      id: string;
      revision: { report: { plannable: boolean } | null };
    }
    let model: Model | undefined;
    for (let tries = 0; tries < 240 && !model; tries++) {
      const { models } = (await json('/api/models')) as { models: Model[] };
      model = models.find((each) => each.revision.report?.plannable);
      if (!model) await new Promise((resolve) => setTimeout(resolve, 500));
    }
    if (!model) throw new Error('No demo model was inspected');
    const { envelopes } = (await json('/api/envelopes')) as { envelopes: { id: string }[] };
    const body = JSON.stringify({ modelId: model.id, envelopeId: envelopes[0]!.id, seed: 1 });
    const plan = (await json('/api/plans', { method: 'POST', headers, body })) as { id: string };
    for (let tries = 0; tries < 300; tries++) {
      const now = (await json(`/api/plans/${plan.id}`)) as { job: { state: string } };
      if (now.job.state === 'done') return { model: model.id, plan: plan.id };
      if (now.job.state === 'failed') throw new Error('The plan failed');
      await new Promise((resolve) => setTimeout(resolve, 500));
    }
    throw new Error('The plan was not made in time');
  });
}

describe('every page at 390 and 1440 px, light and dark', () => {
  let browser: Browser;
  let made: Api;
  beforeAll(async () => {
    browser = await openBrowser();
    mkdirSync(screens, { recursive: true });
    const context = await openWindow(browser, windows[0]);
    const page = await context.newPage();
    await signIn(page, url, 'Designer');
    made = await makePlan(page);
    await context.close();
  });
  afterAll(async () => browser.close());

  it.each(windows)(
    '$width px, $theme: no overflow, no WCAG violation, no complaint',
    async (window) => {
      const context = await openWindow(browser, window);
      const page = await context.newPage();
      const complaints = collectComplaints(page);
      const faults: string[] = [];
      const check = async (name: string) => {
        await page.waitForTimeout(600);
        const overflow = await horizontalOverflow(page);
        if (overflow > 0) faults.push(`${name}: ${overflow} px too wide`);
        for (const violation of await accessibilityViolations(page))
          faults.push(`${name}: ${violation}`);
        const file = `${name}-${window.width}-${window.theme}.png`;
        writeFileSync(join(screens, file), await page.screenshot({ fullPage: true }));
      };
      await page.goto(`${url}/sign-in`);
      await page.getByRole('heading', { name: 'Demo accounts' }).waitFor();
      await check('sign-in');
      await signIn(page, url, 'Shop lead');
      const pages: [string, string, string][] = [
        ['models', '/models', 'table'],
        ['model', `/models/${made.model}`, 'sw-mesh-note'],
        ['cut-preview', `/models/${made.model}/cut-preview`, 'canvas'],
        ['envelopes', '/envelopes', 'table'],
        ['envelope-new', '/envelopes/new', 'form'],
        ['materials', '/materials', 'table'],
        ['material-new', '/materials/new', 'form'],
        ['plans', `/plans?modelId=${made.model}`, 'table'],
        ['plan', `/plans/${made.plan}`, 'sw-proof-table'],
        ['not-found', '/nowhere', 'h1'],
      ];
      for (const [name, path, landmark] of pages) {
        await page.goto(`${url}${path}`);
        await page.locator(landmark).first().waitFor();
        await check(name);
      }
      expect(faults).toEqual([]);
      expect(complaints).toEqual([]);
      await context.close();
    },
  );
});
