import type { Browser } from 'playwright-core';
import path from 'node:path';
import { House } from '../../../api/test/support/house.ts';
import { openBrowser } from './browser.ts';

/** What a scenario plays on: a house with the built portal, one web process and one worker, and a browser. */
export interface Stage {
  house: House;
  url: string;
  browser: Browser;
  close: () => Promise<void>;
}

export async function openStage(): Promise<Stage> {
  const house = await House.open({ PORTAL_DIST: path.join(import.meta.dirname, '../../dist') });
  const { url } = await house.web();
  await house.worker({ env: { PUBLIC_URL: url } });
  const browser = await openBrowser();
  return {
    house,
    url,
    browser,
    close: async () => {
      await browser.close();
      await house.close();
    },
  };
}
