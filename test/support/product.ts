import { type Browser, type BrowserContext, type Page } from 'playwright-core';

/** One of the demo accounts that the sign-in page lists, by its role's written name. */
export type DemoRole = 'Owner' | 'Shop lead' | 'Designer' | 'Maker';

/** Signs in through the page as a person would: one click on a demo account. */
export async function signIn(page: Page, url: string, role: DemoRole): Promise<void> {
  await page.goto(`${url}/sign-in`);
  const account = page.getByRole('listitem').filter({ has: page.getByText(role, { exact: true }) });
  await account.getByRole('button', { name: /^Sign in as/ }).click();
  await page.waitForURL(`${url}/models`);
}

export interface Window {
  readonly width: number;
  readonly height: number;
  readonly theme: 'light' | 'dark';
}

export async function openWindow(browser: Browser, window: Window): Promise<BrowserContext> {
  return browser.newContext({
    viewport: { width: window.width, height: window.height },
    colorScheme: window.theme,
    reducedMotion: 'reduce',
    acceptDownloads: true,
  });
}
