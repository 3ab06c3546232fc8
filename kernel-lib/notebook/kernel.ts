import { createHmac, randomBytes } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';

/**
 * All that depends on the insides of the kernel: where its live module is, how a message leaves it, what it gets wrong. The
 * version below is the one whose insides were read; with another one only its public interface is used.
 */
const KNOWN_VERSION = '1.0.22';

/** A MIME bundle: content type to content. */
export type MimeBundle = Readonly<Record<string, unknown>>;

/** One run of a cell. Front ends that name their cells send the name, but for cells queued at import it comes late. */
export interface CellRun {
  cellId: string | null;
  code: string | null;
  /** Names of cells deleted since the run before. */
  deletedCells: readonly string[];
}

/** The running kernel, as far as the library needs it. */
export interface Kernel {
  /** Version of the kernel program. */
  readonly version: string;
  /** Whether messages survive a flood of output, that is whether its insides are the known ones. */
  readonly mended: boolean;
  /**
   * Shows a bundle beneath the cell run last.
   * @param displayId name under which a later call with `update` replaces it
   */
  display(bundle: MimeBundle, displayId?: string, update?: boolean): void;
  /** Whether the call under way comes from the kernel printing the last expression of a cell. */
  isLastExpression(): boolean;
  /** The run under way, or the last one. */
  currentCell(): CellRun;
  /** Calls back when a cell starts. */
  onCellStart(listener: (cell: CellRun) => void): void;
}

type WriteDisplayData = (content: object, update?: boolean) => void;
interface Header {
  msg_id: string;
  msg_type: string;
  session: string;
  username: string;
}
interface Message {
  readonly header: Header;
  readonly metadata: { readonly cellId?: unknown; readonly deletedCells?: unknown };
  readonly content: { readonly code?: unknown };
}
interface Publisher {
  send(frames: unknown[]): Promise<void>;
  sendTimeout: number;
  sendHighWaterMark: number;
}
interface Handler {
  execCount: number;
  handleExecuteImpl(request: { code: string }, ...rest: unknown[]): Promise<unknown>;
}
interface Server {
  readonly handler: Handler;
  publishStatus(status: string, parent: Message): void;
}
interface JupyterModule {
  readonly lastWriteDisplayData: WriteDisplayData | null;
  readonly ZmqServer: { readonly prototype: Server };
  readonly JupyterHandlerImpl: { readonly prototype: Handler };
}
interface TslabGlobal {
  require(name: string): unknown;
}

const KEY: unique symbol = Symbol.for('coeval.kernel') as never;
const requireHere = createRequire(import.meta.url);

/**
 * The kernel this process is, mended where it is known to lose messages; null in any other process. The first call does the
 * work, later ones (from another copy of the library too) return the same.
 */
export function connectKernel(): Kernel | null {
  const shared = globalThis as Record<symbol, unknown>;
  if (shared[KEY] === undefined) shared[KEY] = findKernel();
  return shared[KEY] as Kernel | null;
}

function findKernel(): Kernel | null {
  const tslab = (globalThis as { __tslab__?: TslabGlobal }).__tslab__;
  if (tslab === undefined || typeof tslab.require !== 'function') return null;
  const found = liveModule();
  const version = found === null ? 'unknown' : versionBeside(found.path);
  if (found !== null && version === KNOWN_VERSION) {
    try {
      return knownKernel(found.module, found.path);
    } catch (error) {
      return strangeKernel(tslab, version, error instanceof Error ? error.message : String(error));
    }
  }
  return strangeKernel(tslab, version, `Coeval knows version ${KNOWN_VERSION}`);
}

/** A globally installed kernel hands over to a local one, so two copies may be loaded: the live one can write. */
function liveModule(): { module: JupyterModule; path: string } | null {
  for (const [path, loaded] of Object.entries(requireHere.cache)) {
    if (!/[\\/]tslab[\\/]dist[\\/]jupyter\.js$/.test(path)) continue;
    const module = loaded?.exports as JupyterModule | undefined;
    if (typeof module?.lastWriteDisplayData === 'function') return { module, path };
  }
  return null;
}

function versionBeside(path: string): string {
  try {
    const text = readFileSync(join(dirname(dirname(path)), 'package.json'), 'utf8');
    return String((JSON.parse(text) as { version?: unknown }).version);
  } catch {
    return 'unknown';
  }
}

function knownKernel(jupyter: JupyterModule, path: string): Kernel {
  const zeromq = createRequire(path)('zeromq') as { Publisher: { prototype: object } };
  const first = traceMessage(zeromq.Publisher.prototype, currentWriter(jupyter));
  // With its stock limits the socket drops what comes after 512 messages sent in a row, the end of the cell included.
  first.socket.sendTimeout = 0;
  first.socket.sendHighWaterMark = 0;
  const requestOf = (write: WriteDisplayData) => traceMessage(zeromq.Publisher.prototype, write).parent;
  const watch = watchCells(jupyter, first.socket, first.parent, requestOf);
  watch.onCellStart(nameVariables);
  return {
    version: KNOWN_VERSION,
    mended: true,
    display: (bundle, displayId, update) => {
      const transient = displayId === undefined ? {} : { display_id: displayId };
      currentWriter(jupyter)({ data: bundle, metadata: {}, transient }, update);
    },
    isLastExpression: () => consoleIsCalledFrom(/[\\/]tslab[\\/]dist[\\/]executor\.js$/),
    ...watch,
  };
}

function currentWriter(jupyter: JupyterModule): WriteDisplayData {
  if (jupyter.lastWriteDisplayData === null) throw new Error('no cell has run yet');
  return jupyter.lastWriteDisplayData;
}

/**
 * Lets one message be made and caught instead of sent: shows the socket, and the request it would answer. Sockets take no new
 * property, so their prototype gets it for that moment.
 */
function traceMessage(target: object, write: WriteDisplayData): { socket: Publisher; parent: Header } {
  let caught: { socket: Publisher; frames: unknown[] } | null = null;
  Object.defineProperty(target, 'send', {
    configurable: true,
    value(this: Publisher, frames: unknown[]) {
      caught = { socket: this, frames };
      return Promise.resolve();
    },
  });
  try {
    write({ data: {}, metadata: {}, transient: {} });
  } finally {
    Reflect.deleteProperty(target, 'send');
  }
  const { socket, frames } = caught ?? { socket: null, frames: [] };
  const start = frames.findIndex((frame) => String(frame) === '<IDS|MSG>');
  if (socket === null || start < 0) throw new Error('a message does not leave it in the known way');
  return { socket, parent: JSON.parse(String(frames[start + 3])) as Header };
}

/**
 * Follows the runs of cells and publishes the `execute_input` message that the kernel leaves out; without it an executed
 * notebook has no execution counts. Changes prototypes only: no timer, no listener keeps the process alive.
 */
function watchCells(
  jupyter: JupyterModule,
  socket: Publisher,
  importing: Header,
  requestOf: (write: WriteDisplayData) => Header,
): Pick<Kernel, 'currentCell' | 'onCellStart'> {
  const listeners: ((cell: CellRun) => void)[] = [];
  const requests = new Map<string, Message>();
  const key = signingKey();
  let cell: CellRun = { cellId: null, code: null, deletedCells: [] };
  let cellRequest = importing.msg_id;
  // The cell that imports the library began unseen: its number is known when it ends or the next one begins, its text when
  // it is reported idle.
  let unnumbered: { id: string; count: number | null } | null = { id: importing.msg_id, count: null };

  const publishInput = (parent: Header, code: string, count: number) => {
    if (key !== null) publish(socket, key, parent, 'execute_input', { code, execution_count: count });
  };

  const server = jupyter.ZmqServer.prototype;
  const publishStatus = server.publishStatus;
  server.publishStatus = function (status, request) {
    if (request.header.msg_type === 'execute_request') {
      if (status === 'busy') requests.set(request.header.msg_id, request);
      else requests.delete(request.header.msg_id);
      if (cellRequest === request.header.msg_id) describeRun(cell, request);
      if (unnumbered?.id === request.header.msg_id) {
        publishInput(request.header, String(request.content.code ?? ''), unnumbered.count ?? this.handler.execCount);
        unnumbered = null;
      }
    }
    publishStatus.call(this, status, request);
  };

  const handler = jupyter.JupyterHandlerImpl.prototype;
  const handleExecuteImpl = handler.handleExecuteImpl;
  const begin = (request: { code: string }, count: number, write: WriteDisplayData) => {
    const parent = requestOf(write);
    if (unnumbered !== null) unnumbered.count ??= count - 1;
    cell = { cellId: null, code: request.code, deletedCells: [] };
    cellRequest = parent.msg_id;
    const message = requests.get(parent.msg_id);
    if (message) describeRun(cell, message);
    publishInput(parent, request.code, count);
    for (const listener of listeners) listener(cell);
  };
  handler.handleExecuteImpl = function (request, ...rest) {
    try {
      begin(request, this.execCount + 1, rest[1] as WriteDisplayData);
    } catch {
      // Nothing of ours may keep a cell from running.
    }
    return handleExecuteImpl.call(this, request, ...rest);
  };
  return { currentCell: () => cell, onCellStart: (listener) => void listeners.push(listener) };
}

/**
 * The kernel keeps the variables of earlier cells as properties of one object and rewrites their names, but forgets those in
 * shorthand properties: `{ age }` fails where `{ age: age }` works. As globals they are found there too.
 */
function nameVariables(): void {
  const { exports: variables } = (globalThis as { __tslab__?: { exports?: Record<string, unknown> } }).__tslab__ ?? {};
  if (typeof variables !== 'object' || variables === null) return;
  for (const name of Object.getOwnPropertyNames(variables)) {
    if (name in globalThis) continue;
    Object.defineProperty(globalThis, name, {
      configurable: true,
      get: () => variables[name],
      set: (value: unknown) => {
        variables[name] = value;
      },
    });
  }
}

function describeRun(cell: CellRun, request: Message): void {
  const { cellId, deletedCells } = request.metadata;
  if (typeof cellId === 'string') cell.cellId = cellId;
  if (typeof request.content.code === 'string') cell.code = request.content.code;
  if (Array.isArray(deletedCells)) cell.deletedCells = deletedCells.map(String);
}

/** Key of the connection file the kernel was started with; null when there is none. */
function signingKey(): string | null {
  const at = process.argv.findIndex((word) => word === '--config-path' || word.startsWith('--config-path='));
  const path = process.argv[at]?.includes('=') ? process.argv[at].slice('--config-path='.length) : process.argv[at + 1];
  if (at < 0 || path === undefined) return null;
  try {
    return String((JSON.parse(readFileSync(path, 'utf8')) as { key?: unknown }).key ?? '');
  } catch {
    return null;
  }
}

function publish(socket: Publisher, key: string, parent: Header, type: string, content: object): void {
  const header = {
    version: '5.3',
    date: new Date().toISOString(),
    session: parent.session,
    username: parent.username,
    msg_type: type,
    msg_id: randomBytes(16).toString('hex'),
  };
  const parts = [header, parent, {}, content].map((part) => JSON.stringify(part));
  const hmac = createHmac('sha256', key);
  for (const part of parts) hmac.update(part);
  // A socket that is closing refuses; nobody reads then.
  socket.send([type, '<IDS|MSG>', hmac.digest('hex'), ...parts]).catch(() => {});
}

/** Whether console.log is at work and was called from a file whose path matches. */
function consoleIsCalledFrom(file: RegExp): boolean {
  const { stackTraceLimit, prepareStackTrace } = Error;
  try {
    Error.stackTraceLimit = 120;
    Error.prepareStackTrace = (_, frames) => frames;
    const frames = new Error().stack as unknown as NodeJS.CallSite[];
    const files = frames.map((frame) => frame.getFileName() ?? '');
    const console = files.findIndex((name) => name.startsWith('node:internal/console'));
    if (console < 0) return false;
    return file.test(files.slice(console).find((name) => !name.startsWith('node:internal/console')) ?? '');
  } finally {
    Error.stackTraceLimit = stackTraceLimit;
    Error.prepareStackTrace = prepareStackTrace;
  }
}

interface PublicDisplay {
  raw(contentType: string, content: unknown): void;
}

/** A kernel whose insides are not the known ones: its public interface, one content type at a time; says so once. */
function strangeKernel(tslab: TslabGlobal, version: string, reason: string): Kernel {
  console.warn(
    `coeval: this kernel is tslab ${version} (${reason}). Results print as text, and show(result) shows them richly; ` +
      'but a cell that prints more than about 500 lines at once may lose some and not end. ' +
      `To mend it: npm install tslab@${KNOWN_VERSION}`,
  );
  const displays = new Map<string, PublicDisplay>();
  const cell: CellRun = { cellId: null, code: null, deletedCells: [] };
  return {
    version,
    mended: false,
    display: (bundle, displayId) => {
      const { newDisplay } = tslab.require('tslab') as { newDisplay(): PublicDisplay };
      const shown = (displayId === undefined ? undefined : displays.get(displayId)) ?? newDisplay();
      if (displayId !== undefined) displays.set(displayId, shown);
      const type = 'text/html' in bundle ? 'text/html' : Object.keys(bundle)[0];
      shown.raw(type, bundle[type]);
    },
    isLastExpression: () => false,
    currentCell: () => cell,
    onCellStart: () => {},
  };
}
