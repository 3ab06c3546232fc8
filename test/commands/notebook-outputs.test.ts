import { describe, expect, it } from 'vitest';
import { errorOf, headingOf, resultLine } from '../../kernel-lib/commands/notebook-outputs.mjs';
import { notebookOf } from './scratch';

const stream = (text: string | string[], name = 'stdout') => ({ output_type: 'stream', name, text });
const shown = (text: string | string[]) => ({
  output_type: 'display_data',
  data: { 'text/plain': text },
  metadata: {},
});
const cellWith = (...outputs: object[]) => ({ cell_type: 'code', source: '', outputs });

describe('headingOf', () => {
  it('is the nearest heading above, without markup', () => {
    const { cells } = notebookOf('# *Title*', 'a', '## Members `now`\n\ntext', 'b', 'c');
    expect(headingOf(cells, 1)).toBe('Title');
    expect(headingOf(cells, 4)).toBe('Members now');
  });

  it('falls back on the first line of the cell', () => {
    const { cells } = notebookOf('\n// Read the field\nread()', `const x = '${'y'.repeat(80)}'`);
    expect(headingOf(cells, 0)).toBe('Read the field');
    expect(headingOf(cells, 1)).toHaveLength(60);
  });
});

describe('resultLine', () => {
  it('is the last line that begins with "Result: ", from a rich result or printed', () => {
    const cells = [
      cellWith(shown(['Result: first\n', 'more'])),
      cellWith(stream('noise\nResult: 412 members; age 0.7 Gyr\nmore'), stream('Result: an error', 'stderr')),
      cellWith(shown('No Result: here')),
    ];
    expect(resultLine({ cells })).toBe('Result: 412 members; age 0.7 Gyr');
    expect(resultLine({ cells: [cellWith(), { cell_type: 'markdown', source: 'Result: x' }] })).toBeNull();
  });
});

describe('errorOf', () => {
  it('takes an error output as it is', () => {
    const output = { output_type: 'error', ename: 'RangeError', evalue: 'too far', traceback: [] };
    expect(errorOf(cellWith(stream('TypeError: other', 'stderr'), output))).toBe('RangeError: too far');
  });

  it('finds the message in a printed stack, with all its lines', () => {
    const text =
      'evalmachine.<anonymous>:2\nthrow new RangeError(1);\n^\n\nRangeError: too far\n  by 3 pc\n    at evalmachine\n';
    expect(errorOf(cellWith(stream(text, 'stderr')))).toBe('RangeError: too far\n  by 3 pc');
    expect(errorOf(cellWith(stream('Error\n    at x\n', 'stderr')))).toBe('Error');
  });

  it('finds the lines of the compiler', () => {
    const text = "1:7 - Type 'number' is not assignable to type 'string'.\n2:1 - Cannot find name 'b'.\n";
    expect(errorOf(cellWith(stream(text, 'stderr')))).toBe(
      "line 1:7 - Type 'number' is not assignable to type 'string'.\nline 2:1 - Cannot find name 'b'.",
    );
    expect(errorOf(cellWith())).toBe('it gave no message');
  });
});
