import { type ChildProcess, spawn } from 'node:child_process';
import { mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Page } from 'playwright-core';
import { build } from '../../kernel-lib/commands/build.mjs';
import { jupyterEnvironment, venvPython } from '../../kernel-lib/commands/environment.mjs';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';
import type { NotebookJson } from '../../kernel-lib/report/notebook-json';
import { openPage, type PageOptions, type Watch } from './page';

/** A JupyterLab of its own, with a folder in which `coeval` is found by its name. */
export interface Lab {
  readonly address: string;
  readonly folder: string;
  /** Writes a notebook of code cells that were not run. */
  write(name: string, cells: readonly string[]): void;
  writeRaw(name: string, notebook: object): void;
  /** The notebook as saved. */
  read(name: string): NotebookJson;
  /** Opens a notebook and waits until its kernel is idle. */
  open(name: string, options?: PageOptions): Promise<{ page: Page; watch: Watch }>;
  close(): Promise<void>;
}

/** Starts JupyterLab on a new folder; the library is built first where sources changed. */
export async function startLab(): Promise<Lab> {
  await build();
  const results = inRoot('notebooks', 'results');
  mkdirSync(results, { recursive: true });
  const folder = mkdtempSync(join(results, 'lab-'));
  const port = await freePort();
  const address = `http://127.0.0.1:${port}`;
  const settings = mkdtempSync(join(tmpdir(), 'coeval-lab-'));
  const server = startServer(folder, settings, port);
  await answers(server, `${address}/api/status`);
  return {
    address,
    folder,
    write: (name, cells) => writeFileSync(join(folder, name), JSON.stringify(notebookOf(cells))),
    writeRaw: (name, notebook) => writeFileSync(join(folder, name), JSON.stringify(notebook)),
    read: (name) => JSON.parse(readFileSync(join(folder, name), 'utf8')) as NotebookJson,
    open: async (name, options) => {
      const opened = await openPage(options);
      await opened.page.goto(`${address}/lab/tree/${encodeURIComponent(name)}?reset`);
      await notebookReady(opened.page);
      return opened;
    },
    close: async () => {
      await ended(server.child);
      for (const made of [folder, settings]) rmSync(made, { recursive: true, force: true });
    },
  };
}

/** Runs a command of the front end, such as `notebook:run-all-cells`. */
export async function labCommand(page: Page, name: string, options: object = {}): Promise<void> {
  await page.evaluate(
    async ([command, parameters]) => {
      const app = (globalThis as unknown as { jupyterapp: { commands: { execute(c: string, o: object): unknown } } })
        .jupyterapp;
      await app.commands.execute(command as string, parameters as object);
    },
    [name, options],
  );
}

/** Waits until the notebook in front has a kernel that is idle. */
export async function notebookReady(page: Page): Promise<void> {
  await page.waitForFunction(
    () => {
      const app = (globalThis as { jupyterapp?: LabApp }).jupyterapp;
      return app?.shell?.currentWidget?.sessionContext?.session?.kernel?.status === 'idle';
    },
    undefined,
    { timeout: 120_000 },
  );
}

/** Runs all cells of the notebook in front and waits until they have ended. */
export async function runAll(page: Page): Promise<void> {
  await labCommand(page, 'notebook:run-all-cells');
  await allNumbered(page);
}

/** Makes a cell the active one, runs it and waits until it has ended. */
export async function runCell(page: Page, index: number): Promise<void> {
  await page.locator('.jp-Notebook .jp-Cell .jp-InputPrompt').nth(index).click();
  await labCommand(page, 'notebook:run-cell');
  await allNumbered(page);
}

/** A cell that waits or runs has a star for its number. */
async function allNumbered(page: Page): Promise<void> {
  await page.waitForFunction(
    () => {
      const prompts = Array.from(document.querySelectorAll('.jp-CodeCell .jp-InputPrompt'), (p) => p.textContent ?? '');
      return prompts.length > 0 && prompts.every((text) => /\d/.test(text));
    },
    undefined,
    { timeout: 60_000 },
  );
  await notebookReady(page);
}

interface LabApp {
  shell?: { currentWidget?: { sessionContext?: { session?: { kernel?: { status?: string } } } } };
}

const kernelspec = { name: 'tslab', display_name: 'TypeScript (tslab)', language: 'typescript' };

function notebookOf(cells: readonly string[]): object {
  return {
    nbformat: 4,
    nbformat_minor: 5,
    metadata: { kernelspec, language_info: { name: 'typescript' } },
    cells: cells.map((source, i) => ({
      cell_type: 'code',
      id: `cell-${i}`,
      metadata: {},
      execution_count: null,
      outputs: [],
      source,
    })),
  };
}

interface Server {
  readonly child: ChildProcess;
  readonly log: string[];
}

function startServer(folder: string, settings: string, port: number): Server {
  // What is chosen in a test, a theme say, must not stay chosen.
  const env = {
    ...jupyterEnvironment(),
    JUPYTERLAB_SETTINGS_DIR: join(settings, 'settings'),
    JUPYTERLAB_WORKSPACES_DIR: join(settings, 'workspaces'),
  };
  mkdirSync(env.JUPYTER_RUNTIME_DIR, { recursive: true });
  const parameters = [
    ...['-m', 'jupyterlab', '--no-browser', '--allow-root', '--ip=127.0.0.1', `--port=${port}`],
    ...[
      '--ServerApp.port_retries=0',
      `--ServerApp.root_dir=${folder}`,
      '--IdentityProvider.token=',
      '--ServerApp.password=',
    ],
    ...['--LabApp.expose_app_in_browser=True', '--LabApp.extension_manager=readonly', '--LabApp.news_url='],
  ];
  const child = spawn(venvPython, parameters, { env, stdio: ['ignore', 'pipe', 'pipe'] });
  const log: string[] = [];
  for (const stream of [child.stdout, child.stderr]) stream.setEncoding('utf8').on('data', (text) => log.push(text));
  return { child, log };
}

async function answers(server: Server, address: string): Promise<void> {
  for (let i = 0; i < 600; i++) {
    if (server.child.exitCode !== null) break;
    if (
      await fetch(address).then(
        (reply) => reply.ok,
        () => false,
      )
    )
      return;
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  server.child.kill('SIGKILL');
  throw new Error(`JupyterLab did not start:\n${server.log.join('').slice(-3000)}`);
}

async function ended(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null) return;
  const end = new Promise((resolve) => child.once('close', resolve));
  child.kill('SIGTERM');
  await end;
}

function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const server = createServer();
    server.once('error', reject);
    server.listen(0, '127.0.0.1', () => {
      const { port } = server.address() as { port: number };
      server.close(() => resolve(port));
    });
  });
}
