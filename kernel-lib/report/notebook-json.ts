/** A notebook as it is stored (nbformat 4), as far as a report reads it. */
export interface NotebookJson {
  readonly cells: readonly NotebookCell[];
  readonly metadata?: { readonly title?: unknown };
}

/** A cell of a stored notebook. */
export interface NotebookCell {
  readonly cell_type: string;
  readonly source: string | readonly string[];
  readonly execution_count?: number | null;
  readonly outputs?: readonly NotebookOutput[];
  readonly attachments?: Readonly<Record<string, Readonly<Record<string, string>>>>;
  readonly metadata?: { readonly execution?: Readonly<Record<string, string>> };
}

/** An output of a cell. */
export interface NotebookOutput {
  readonly output_type: string;
  readonly name?: string;
  readonly text?: string | readonly string[];
  readonly data?: Readonly<Record<string, unknown>>;
  readonly ename?: string;
  readonly evalue?: string;
  readonly traceback?: readonly string[];
}

/** Text is stored whole or as a list of lines. */
export function joined(text: unknown): string {
  if (Array.isArray(text)) return text.join('');
  return text == null ? '' : typeof text === 'string' ? text : JSON.stringify(text, null, 1);
}

/** What an output says in plain text; errors and warnings left out. */
export function plainOutput(output: NotebookOutput): string {
  if (output.output_type === 'stream') return output.name === 'stdout' ? joined(output.text) : '';
  return joined(output.data?.['text/plain']);
}

/** The last line among the outputs that begins with `Result: `, without that word; null when there is none. */
export function resultLine(notebook: NotebookJson): string | null {
  const texts = notebook.cells.flatMap((cell) => cell.outputs ?? []).map(plainOutput);
  const lines = texts.flatMap((text) => text.split('\n')).filter((line) => line.startsWith('Result: '));
  return lines.at(-1)?.slice('Result: '.length) ?? null;
}

/** When the last cell ended, as the program that ran the notebook recorded it (ISO 8601); null when it did not. */
export function executedAt(notebook: NotebookJson): string | null {
  const times = notebook.cells.map((cell) => cell.metadata?.execution?.['shell.execute_reply']);
  const known = times.filter((time): time is string => typeof time === 'string' && !Number.isNaN(Date.parse(time)));
  return known.sort((a, b) => Date.parse(a) - Date.parse(b)).at(-1) ?? null;
}

/**
 * Reads a stored notebook.
 * @throws Error that names the file and says what it is not
 */
export function parseNotebook(caller: string, name: string, text: string): NotebookJson {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch (error) {
    throw new Error(`${caller}: ${name} is not a notebook: ${(error as Error).message}.`);
  }
  const { cells, nbformat } = (value ?? {}) as { cells?: unknown; nbformat?: unknown };
  if (!Array.isArray(cells) || nbformat !== 4) {
    const found = nbformat === undefined ? 'no nbformat' : `nbformat ${JSON.stringify(nbformat)}`;
    throw new Error(
      `${caller}: ${name} is not a notebook of format 4 (found ${found}). Save it from JupyterLab again.`,
    );
  }
  return value as NotebookJson;
}
