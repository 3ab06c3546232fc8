import type { NotebookCell, NotebookJson, NotebookOutput } from '../../kernel-lib/report/notebook-json';

/** A stored notebook from its cells. */
export const notebook = (...cells: NotebookCell[]): NotebookJson & { nbformat: number; nbformat_minor: number } => ({
  nbformat: 4,
  nbformat_minor: 5,
  metadata: {},
  cells,
});

export const text = (source: string, more: Partial<NotebookCell> = {}): NotebookCell => ({
  cell_type: 'markdown',
  source,
  ...more,
});

let count = 0;

export const code = (source: string, ...outputs: NotebookOutput[]): NotebookCell => ({
  cell_type: 'code',
  source,
  execution_count: ++count,
  metadata: {},
  outputs,
});

export const shown = (data: Record<string, unknown>): NotebookOutput => ({ output_type: 'display_data', data });
export const html = (content: string): NotebookOutput => shown({ 'text/html': content, 'text/plain': 'plain' });
export const printed = (content: string, name = 'stdout'): NotebookOutput => ({
  output_type: 'stream',
  name,
  text: content,
});
