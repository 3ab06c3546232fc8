import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { type Browser, type ConsoleMessage, chromium, type Page } from 'playwright-core';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';
import { findChromium } from '../chromium.mjs';

const FLAGS = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
  // WebGL in software: figures of many points use it.
  '--use-angle=swiftshader',
  '--enable-unsafe-swiftshader',
];

/** What a page did that a test wants to know. */
export interface Watch {
  /** Errors on the console and errors nobody caught. */
  readonly errors: string[];
  /** Addresses asked for, data and blob addresses apart. */
  readonly requests: string[];
}

/** How a page is opened. */
export interface PageOptions {
  readonly width?: number;
  readonly height?: number;
  readonly dark?: boolean;
}

let browser: Promise<Browser> | null = null;

/** The browser of this test file; started when first asked for. Call closeBrowser in afterAll. */
export function openBrowser(): Promise<Browser> {
  const executablePath = findChromium();
  if (executablePath === null) throw new Error('no Chromium found. npm test installs one or says how to get one.');
  browser ??= chromium.launch({ executablePath, args: FLAGS });
  return browser;
}

export async function closeBrowser(): Promise<void> {
  const open = browser;
  browser = null;
  await (await open)?.close();
}

/** A new page, alone in its profile, with a record of its errors and requests. */
export async function openPage(options: PageOptions = {}): Promise<{ page: Page; watch: Watch }> {
  const { width = 1280, height = 900, dark = false } = options;
  const context = await (await openBrowser()).newContext({
    viewport: { width, height },
    colorScheme: dark ? 'dark' : 'light',
  });
  const page = await context.newPage();
  const watch: Watch = { errors: [], requests: [] };
  page.on('console', (message: ConsoleMessage) => {
    if (message.type() === 'error') watch.errors.push(message.text());
  });
  page.on('pageerror', (error) => void watch.errors.push(String(error)));
  page.on('request', (request) => {
    if (!/^(data|blob):/.test(request.url())) watch.requests.push(request.url());
  });
  return { page, watch };
}

/** Address of a local file. */
export const fileAddress = (path: string): string => new URL(`file://${path}`).href;

/** Takes a picture for a person to look at: test/.output/<name>.png, never committed. */
export async function takePicture(page: Page, name: string, options: { fullPage?: boolean } = {}): Promise<string> {
  const folder = inRoot('test', '.output', 'pictures');
  mkdirSync(folder, { recursive: true });
  const path = join(folder, `${name}.png`);
  await page.screenshot({ path, ...options });
  return path;
}

/** Waits until every figure of the page is drawn by Plotly. */
export async function figuresDrawn(page: Page, count: number): Promise<void> {
  await page.waitForFunction(
    (n) => document.querySelectorAll('[data-fig][data-drawn] .main-svg .cartesianlayer').length >= n,
    count,
    { timeout: 30_000 },
  );
}
