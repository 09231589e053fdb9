import { readFile } from 'node:fs/promises';
import path from 'node:path';
import AxeBuilder from '@axe-core/playwright';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';

function needed(name: string): string {
  const value = process.env[name];
  if (!value) throw new Error(`${name} is set by npm test; run the end-to-end tests through it.`);
  return value;
}

export const SITE = (): string => needed('BASE_URL');
export const PASSWORD = 'a password for the story';

/** No first-run pages and no calls of the browser's own to the outside. */
const FLAGS = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];

export function openBrowser(): Promise<Browser> {
  return chromium.launch({ executablePath: needed('CHROMIUM'), args: FLAGS });
}

/** A person at a desk: own cookies, and a record of everything the browser complains about. */
export class Desk {
  private constructor(
    readonly context: BrowserContext,
    readonly page: Page,
    private readonly complaints: string[],
  ) {}

  static async open(browser: Browser, viewport = { width: 1440, height: 900 }): Promise<Desk> {
    const context = await browser.newContext({ viewport, locale: 'en-GB', baseURL: SITE() });
    context.setDefaultTimeout(20_000);
    const page = await context.newPage();
    const complaints: string[] = [];
    page.on('pageerror', (error) => complaints.push(error.message));
    page.on('console', (message) => {
      // The browser notes every answer of 400 and above; those the story asks for are checked where they happen.
      if (message.type() === 'error' && !message.text().startsWith('Failed to load resource'))
        complaints.push(message.text());
    });
    return new Desk(context, page, complaints);
  }

  async signIn(email: string, password = PASSWORD): Promise<void> {
    await this.page.goto('/sign-in');
    await this.page.getByLabel('E-mail').fill(email);
    await this.page.getByLabel('Password', { exact: true }).fill(password);
    await this.page.getByRole('button', { name: 'Sign in' }).click();
    await this.page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
  }

  /** Fails when the browser has complained since the last call. */
  expectQuiet(): void {
    expect(this.complaints.splice(0)).toEqual([]);
  }

  /** Nothing serious by axe's rules for WCAG 2.2 A and AA; the page does not scroll sideways. */
  async expectAccessible(): Promise<void> {
    const { violations } = await new AxeBuilder({ page: this.page })
      .withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'])
      .analyze();
    const serious = violations.filter((v) => v.impact === 'serious' || v.impact === 'critical');
    expect(serious.map((v) => `${v.id}: ${v.nodes.map((n) => n.target.join(' ')).join(', ')}`)).toEqual([]);
    await this.expectNoSideways();
  }

  async expectNoSideways(): Promise<void> {
    const over = await this.page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
    expect(over).toBeLessThanOrEqual(0);
  }

  close(): Promise<void> {
    return this.context.close();
  }
}

const FIXTURES = path.resolve('fixtures');

/** A file of fixtures/ under another name, as a file chooser wants it. */
export async function fixture(
  file: string,
  name: string,
): Promise<{ name: string; mimeType: string; buffer: Buffer }> {
  return { name, mimeType: 'application/octet-stream', buffer: await readFile(path.join(FIXTURES, file)) };
}
