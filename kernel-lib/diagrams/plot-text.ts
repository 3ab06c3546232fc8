const ENTITIES: Readonly<Record<string, string>> = {
  '&lt;': '<',
  '&gt;': '>',
  '&amp;': '&',
  '&quot;': '"',
  '&#39;': "'",
};

/**
 * Text from data made safe for a label, a legend or a hover box: figure text may carry the tags b, i, sub, sup and br, so
 * a name such as `<b>` must be written with entities to show as it stands.
 * @example plotText('NGC <1>') // => 'NGC &lt;1&gt;'
 */
export function plotText(text: unknown): string {
  return String(text ?? '')
    .replace(/&/g, '&amp;')
    .replace(/</g, '&lt;')
    .replace(/>/g, '&gt;');
}

/** Figure text without its tags, entities resolved. */
export function plainText(markup: string): string {
  return textRuns(markup)
    .map((run) => (run.newLine ? ` ${run.text}` : run.text))
    .join('');
}

/** A stretch of figure text in one style. */
export interface TextRun {
  readonly text: string;
  readonly bold: boolean;
  readonly italic: boolean;
  /** 1 raised, -1 lowered, 0 on the line. */
  readonly shift: -1 | 0 | 1;
  /** Begins a new line. */
  readonly newLine: boolean;
}

/** Splits figure text (tags b, i, sub, sup, br; the five entities) into runs. Any other tag shows as it is written. */
export function textRuns(markup: string): TextRun[] {
  const runs: TextRun[] = [];
  let bold = false;
  let italic = false;
  let shift: -1 | 0 | 1 = 0;
  let newLine = false;
  for (const token of markup.split(/(<\/?(?:b|i|sub|sup)>|<br\s*\/?>)/)) {
    const tag = /^<(\/?)(b|i|sub|sup|br)\s*\/?>$/.exec(token);
    if (tag === null) {
      if (token === '') continue;
      const text = token.replace(/&(?:lt|gt|amp|quot|#39);/g, (e) => ENTITIES[e]);
      runs.push({ text, bold, italic, shift, newLine });
      newLine = false;
    } else if (tag[2] === 'br') {
      newLine = true;
    } else {
      const opens = tag[1] === '';
      if (tag[2] === 'b') bold = opens;
      else if (tag[2] === 'i') italic = opens;
      else shift = opens ? (tag[2] === 'sup' ? 1 : -1) : 0;
    }
  }
  return runs;
}
