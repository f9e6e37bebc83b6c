import axe from 'axe-core';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import type { House } from '../../../api/test/support/house.ts';
import { Visitor } from '../../../api/test/support/visitor.ts';
import { openWindow, type Screen } from './browser.ts';

/** Somebody at a screen. */
export class Someone {
  private constructor(
    readonly house: House,
    readonly url: string,
    readonly email: string,
    readonly context: BrowserContext,
    readonly page: Page,
    readonly troubles: string[],
  ) {}

  static async at(browser: Browser, house: House, url: string, email: string, screen: Screen): Promise<Someone> {
    const { context, page, troubles } = await openWindow(browser, screen);
    return new Someone(house, url, email, context, page, troubles);
  }

  /** Signs in by the code that is mailed, wherever the address leads. */
  async signIn(to = '/jobs', name?: string): Promise<void> {
    const before = this.house.mail.to(this.email).length;
    await this.page.goto(`${this.url}/sign-in?to=${encodeURIComponent(to)}`);
    await this.page.getByLabel('Mail address').fill(this.email);
    await this.page.getByRole('button', { name: 'Mail me a code' }).click();
    await this.page.getByLabel('The six digits').fill(await this.code(before));
    await this.page.getByRole('button', { name: 'Sign in', exact: true }).click();
    if (name) {
      await this.page.getByLabel('Your name').fill(name);
      await this.page.getByRole('button', { name: 'Go on' }).click();
    }
    await this.page.waitForURL((url) => url.pathname === new URL(to, this.url).pathname);
  }

  /** Comes signed in: by a mailed code too, but without a look at the sign-in page, which has scenarios of its own. */
  async enter(to: string): Promise<void> {
    const visitor = new Visitor(this.house, this.url, this.email);
    await visitor.signIn();
    const cookies = visitor.cookie().split('; ').map((pair) => ({ name: pair.slice(0, pair.indexOf('=')), value: pair.slice(pair.indexOf('=') + 1), url: this.url, httpOnly: true, sameSite: 'Strict' as const }));
    await this.context.addCookies(cookies);
    await this.goto(to);
  }

  /** The code in the first mail after the first `before` ones. */
  async code(before: number): Promise<string> {
    for (const end = Date.now() + 15_000; Date.now() < end; await new Promise((done) => setTimeout(done, 30))) {
      const mail = this.house.mail.to(this.email).slice(before).filter((found) => /sign-in code/.test(found.subject ?? '')).at(-1);
      const code = /^\d{6}/.exec(mail?.subject ?? '')?.[0];
      if (code) return code;
    }
    throw new Error(`No code came to ${this.email}.`);
  }

  goto = (path: string) => this.page.goto(`${this.url}${path}`);
  press = (name: string | RegExp) => this.page.getByRole('button', { name }).click();
  follow = (name: string | RegExp) => this.page.getByRole('link', { name }).click();
  fill = (label: string | RegExp, text: string) => this.page.getByLabel(label).fill(text);
  sees = (text: string | RegExp) => this.page.getByText(text).first().waitFor();
  /** Everything that the page says, as one text. */
  text = async (): Promise<string> => (await this.page.locator('main').innerText()).replace(/\s+/g, ' ');

  /** Waits until no color changes any more, three looks in a row. */
  private async colorsFollow(): Promise<void> {
    const colors = () => this.page.evaluate(() => [...document.querySelectorAll('body, h1, button, a, p, span')].map((part) => getComputedStyle(part).color + getComputedStyle(part).backgroundColor).join());
    for (let same = 0, last = ''; same < 3; await this.page.waitForTimeout(50)) {
      const now = await colors();
      same = now === last ? same + 1 : 0;
      last = now;
    }
  }

  /** What axe finds on this page: everything in the light theme; in the dark one what a theme can change, the colors. */
  async axe(): Promise<string[]> {
    const found: string[] = [];
    for (const scheme of ['light', 'dark'] as const) {
      await this.page.emulateMedia({ colorScheme: scheme, reducedMotion: 'reduce' });
      await this.colorsFollow();
      if (scheme === 'light') await this.page.evaluate(axe.source);
      const options = scheme === 'light' ? {} : { runOnly: { type: 'rule' as const, values: ['color-contrast', 'link-in-text-block'] } };
      const { violations } = await this.page.evaluate((only) => (globalThis as unknown as { axe: typeof axe }).axe.run(document, only), options);
      found.push(...violations.flatMap(({ id, nodes }) => nodes.map(({ target, any }) => `${scheme} ${id} ${target.join(' ')} ${any[0]?.message ?? ''}`)));
    }
    return found;
  }

  /** True where the page is wider than its window. */
  overflows = (): Promise<boolean> => this.page.evaluate(() => document.documentElement.scrollWidth > document.documentElement.clientWidth);

  shot = (file: string) => this.page.screenshot({ path: file, fullPage: true });
}
