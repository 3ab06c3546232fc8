import { spawn } from 'node:child_process';
import { existsSync, mkdirSync } from 'node:fs';
import { build } from '../../kernel-lib/commands/build.mjs';
import { jupyterEnvironment, venvPython } from '../../kernel-lib/commands/environment.mjs';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';

/** A cell to run. */
export interface Cell {
  readonly code: string;
  /** What JupyterLab sends along; without it the cell comes as from nbclient. */
  readonly cellId?: string;
  readonly deletedCells?: readonly string[];
  /** Interrupts the kernel when an output of the cell holds the text, `times` in all (default 1). */
  readonly interrupt?: { readonly at: string; readonly times?: number };
}

/** A message that the kernel published, other than its status. */
export interface KernelMessage {
  readonly type: string;
  readonly content: {
    readonly name?: string;
    readonly text?: string;
    readonly data?: Readonly<Record<string, string>>;
    readonly transient?: { readonly display_id?: string };
    readonly execution_count?: number;
    readonly code?: string;
  };
  /** Whether it came after the cell had ended. */
  readonly afterIdle: boolean;
}

/** What came back from one cell. */
export interface CellResult {
  readonly status: 'ok' | 'error' | 'abort';
  readonly count: number | null;
  readonly messages: readonly KernelMessage[];
  /** All it printed, both streams. */
  readonly text: string;
  readonly stdout: string;
  readonly stderr: string;
  /** The bundles it displayed, updates applied, in order. */
  readonly displays: readonly Readonly<Record<string, string>>[];
}

/** How cells are run. */
export interface RunOptions {
  /** Folder in which the kernel works; default notebooks/, where `coeval` is found by its name. */
  readonly cwd?: string;
  /** Seconds for one cell. Default 60. */
  readonly timeout?: number;
  /** Seconds to wait after the last cell for late outputs. Default 0. */
  readonly linger?: number;
  /** Sends all cells at once, as JupyterLab does on "run all". */
  readonly queue?: boolean;
}

/**
 * Runs cells, one after another, in a new real kernel, with the library as built (it is built first where sources changed).
 * @throws Error with what the driver printed when a cell does not end in time
 * @example const [result] = await runCells(['1 + 1']); // result.stdout is '2\n'
 */
export async function runCells(cells: readonly (string | Cell)[], options: RunOptions = {}): Promise<CellResult[]> {
  return (await driveKernel(cells, options)).cells;
}

/** As runCells, and then asks the kernel to end: whether it did by itself. */
export async function runCellsAndEnd(
  cells: readonly (string | Cell)[],
  options: RunOptions = {},
): Promise<{ cells: CellResult[]; ended: boolean }> {
  return driveKernel(cells, options, true);
}

async function driveKernel(cells: readonly (string | Cell)[], options: RunOptions, shutdown = false) {
  await build();
  const { cwd = inRoot('notebooks'), timeout = 60, linger = 0, queue = false } = options;
  mkdirSync(cwd, { recursive: true });
  const task = {
    cells: cells.map((cell) => (typeof cell === 'string' ? { code: cell } : cell)),
    cwd,
    timeout,
    linger,
    queue,
    shutdown,
  };
  const text = await runPython(inRoot('test', 'kernel', 'drive.py'), [], JSON.stringify(task));
  const told = JSON.parse(text) as { cells: Pick<CellResult, 'status' | 'count' | 'messages'>[]; ended: boolean };
  return { cells: told.cells.map(resultOf), ended: told.ended };
}

/** Runs a Python script of the tests in the project's environment. */
export function runPython(script: string, words: readonly string[], input = ''): Promise<string> {
  if (!existsSync(venvPython))
    throw new Error(`${venvPython} is missing. Run npm test once; it sets up the environment.`);
  const env = jupyterEnvironment();
  mkdirSync(env.JUPYTER_RUNTIME_DIR, { recursive: true });
  return new Promise((resolve, reject) => {
    const child = spawn(venvPython, [script, ...words], { env, stdio: ['pipe', 'pipe', 'pipe'] });
    let stdout = '';
    let stderr = '';
    child.stdout.setEncoding('utf8').on('data', (text: string) => {
      stdout += text;
    });
    child.stderr.setEncoding('utf8').on('data', (text: string) => {
      stderr += text;
    });
    child.on('error', reject);
    child.on('close', (status) => {
      if (status === 0) resolve(stdout);
      else reject(new Error(`${script} ended with status ${status}:\n${stderr}`));
    });
    child.stdin.end(input);
  });
}

function resultOf(told: Pick<CellResult, 'status' | 'count' | 'messages'>): CellResult {
  const streamed = (name?: string) =>
    told.messages
      .filter((m) => m.type === 'stream' && (name === undefined || m.content.name === name))
      .map((m) => m.content.text)
      .join('');
  const displays: { id?: string; data: Readonly<Record<string, string>> }[] = [];
  for (const { type, content } of told.messages) {
    const id = content.transient?.display_id;
    if (type === 'display_data') displays.push({ id, data: content.data ?? {} });
    if (type !== 'update_display_data') continue;
    for (const shown of displays) if (id !== undefined && shown.id === id) shown.data = content.data ?? {};
  }
  return {
    ...told,
    text: streamed(),
    stdout: streamed('stdout'),
    stderr: streamed('stderr'),
    displays: displays.map((shown) => shown.data),
  };
}
