import { describe, expect, it } from 'vitest';
import { base64Of } from '../../kernel-lib/diagrams/base64';
import { plainText, plotText, textRuns } from '../../kernel-lib/diagrams/plot-text';

describe('figure text', () => {
  it('shows names from data as they stand', () => {
    const name = '<b>x</b> & "y" <script>';
    expect(plainText(plotText(name))).toBe(name);
    expect(textRuns(plotText(name)).every((run) => !run.bold)).toBe(true);
    expect(plotText(null)).toBe('');
  });

  it('knows raised, lowered, bold and broken text', () => {
    expect(textRuns('10<sup>4</sup> M<sub>V</sub><br><b>new</b>')).toEqual([
      { text: '10', bold: false, italic: false, shift: 0, newLine: false },
      { text: '4', bold: false, italic: false, shift: 1, newLine: false },
      { text: ' M', bold: false, italic: false, shift: 0, newLine: false },
      { text: 'V', bold: false, italic: false, shift: -1, newLine: false },
      { text: 'new', bold: true, italic: false, shift: 0, newLine: true },
    ]);
  });

  it('shows a tag it does not know as text', () => {
    expect(plainText('a <blink>b')).toBe('a <blink>b');
  });
});

describe('base64Of', () => {
  it('agrees with the platform on text beyond ASCII, long and short', () => {
    for (const text of ['', 'L\u2609 \u2264 \u{1f31f}', 'x\u00b1'.repeat(30_000)]) {
      expect(base64Of(text)).toBe(Buffer.from(text, 'utf8').toString('base64'));
    }
  });
});
