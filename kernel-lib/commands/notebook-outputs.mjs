/** nbformat keeps text as a string or as a list of lines. */
export const textOf = (source) => (Array.isArray(source) ? source.join('') : (source ?? ''));

const firstLine = (text) => text.split('\n').find((line) => line.trim() !== '') ?? '';

/** Heading a reader would give a cell: the nearest markdown heading above it, else the cell's own first line. */
export function headingOf(cells, index) {
  for (let i = index; i >= 0; i--) {
    if (cells[i].cell_type !== 'markdown') continue;
    const heading = textOf(cells[i].source).match(/^#{1,6}\s+(.+)$/m);
    if (heading) return heading[1].replace(/[*_`]/g, '').trim();
  }
  const line = firstLine(textOf(cells[index].source))
    .replace(/^\s*\/\/\s*/, '')
    .trim();
  return line.length > 60 ? `${line.slice(0, 57)}...` : line;
}

/** Plain text of one output, errors left out. */
function plainText(output) {
  if (output.output_type === 'stream') return output.name === 'stdout' ? textOf(output.text) : '';
  return textOf(output.data?.['text/plain']);
}

/** The last line that begins with "Result: " among the outputs of a notebook, or null. */
export function resultLine(notebook) {
  const texts = notebook.cells.flatMap((cell) => cell.outputs ?? []).map(plainText);
  const lines = texts.flatMap((text) => text.split('\n')).filter((line) => line.startsWith('Result: '));
  return lines.at(-1) ?? null;
}

const isStackLine = (line) => /^\s+at /.test(line);

/**
 * The message of the error a cell ended with. The stock kernel sends no error output, only what it prints on stderr: a stack,
 * or lines "line:column - message" of the compiler.
 */
export function errorOf(cell) {
  const outputs = cell.outputs ?? [];
  const sent = outputs.find((output) => output.output_type === 'error');
  if (sent) return sent.ename ? `${sent.ename}: ${sent.evalue}` : sent.evalue;
  const printed = outputs.filter((output) => output.output_type === 'stream' && output.name === 'stderr');
  const lines = printed
    .map((output) => textOf(output.text))
    .join('')
    .split('\n');
  const start = lines.findIndex((line) => /^(Uncaught )?\w*(Error|Exception)\b.*/.test(line));
  if (start >= 0) {
    const length = lines.slice(start).findIndex(isStackLine);
    return lines
      .slice(start, length < 0 ? undefined : start + length)
      .join('\n')
      .trim();
  }
  const compiler = lines.filter((line) => /^\d+:\d+ - /.test(line)).map((line) => `line ${line}`);
  return compiler.length > 0 ? compiler.join('\n') : firstLine(lines.join('\n')) || 'it gave no message';
}
