import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { type Browser, chromium, type Page } from 'playwright-core';

const require = createRequire(import.meta.url);
const axeSource = readFileSync(require.resolve('axe-core/axe.min.js'), 'utf8');

/** Debian's Chromium, headless, with WebGL in software. */
export async function openBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: process.env['CHROMIUM'] ?? '/usr/bin/chromium',
    args: [
      '--no-sandbox',
      '--disable-dev-shm-usage',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
      '--use-gl=angle',
      '--use-angle=swiftshader',
      '--enable-unsafe-swiftshader',
    ],
  });
}

/** Collects what a page complains about; `expect(complaints).toEqual([])` at the end. */
export function collectComplaints(page: Page): string[] {
  const complaints: string[] = [];
  page.on('pageerror', (error) => complaints.push(`page error: ${error.message}`));
  page.on('console', (message) => {
    if (message.type() === 'error') complaints.push(`console: ${message.text()}`);
  });
  return complaints;
}

interface AxeRun {
  violations: { id: string; impact: string | null; nodes: { html: string; target: string[] }[] }[];
}

/** Violations of WCAG 2.2 A and AA as short lines; empty is good. */
export async function accessibilityViolations(page: Page): Promise<string[]> {
  await page.evaluate(axeSource);
  const run = (await page.evaluate(
    `axe.run(document, { runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'] })`,
  )) as AxeRun;
  return run.violations.flatMap((violation) =>
    violation.nodes.map((node) => `${violation.id} at ${node.target.join(' ')}: ${node.html}`),
  );
}

/** How many pixels the page is wider than its window; 0 is good. */
export async function horizontalOverflow(page: Page): Promise<number> {
  return page.evaluate(
    () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
  );
}
