import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';

const FLAGS = ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync'];

const TABLET = 768;

export interface Screen {
  width: number;
  height: number;
  scheme: 'light' | 'dark';
}

export const phone: Screen = { width: 360, height: 740, scheme: 'light' };
export const desk: Screen = { width: 1280, height: 900, scheme: 'light' };

export const openBrowser = (): Promise<Browser> => chromium.launch({ executablePath: process.env['CHROMIUM'] ?? '/usr/bin/chromium', args: FLAGS });

/** A window of its own, with cookies of its own; what the page reports as an error is collected. */
export async function openWindow(browser: Browser, { width, height, scheme }: Screen): Promise<{ context: BrowserContext; page: Page; troubles: string[] }> {
  const context = await browser.newContext({ viewport: { width, height }, hasTouch: width < TABLET, colorScheme: scheme, reducedMotion: 'reduce', timezoneId: 'America/New_York', locale: 'en-US' });
  context.setDefaultTimeout(20_000);
  const page = await context.newPage();
  const troubles: string[] = [];
  page.on('pageerror', (error) => troubles.push(error.message));
  page.on('console', (message) => {
    // a refused request is part of some scenarios; a script error or a broken content policy never is
    if (message.type() === 'error' && !message.text().includes('Failed to load resource')) troubles.push(message.text());
  });
  return { context, page, troubles };
}
