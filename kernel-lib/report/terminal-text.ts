import { createRequire } from 'node:module';
import type Anser from 'anser';

const requireHere = createRequire(import.meta.url);

/**
 * Terminal output as HTML: colours as classes, a line rewritten with carriage returns in its last form, everything else escaped.
 * @example terminalHtml('10 %\r20 %') // => '20 %'
 */
export function terminalHtml(text: string): string {
  const anser = requireHere('anser') as typeof Anser;
  return anser.ansiToHtml(anser.escapeForHtml(settled(text)), { use_classes: true });
}

/** Text as a terminal would be left showing it: carriage returns and backspaces carried out. */
export function settled(text: string): string {
  if (!/[\r\b]/.test(text)) return text;
  return text
    .replace(/\r\n/g, '\n')
    .split('\n')
    .map((line) => {
      // What is written after a return covers what was there only as far as it reaches, and a code clears the rest.
      const forms = line.split('\r').filter((form) => form !== '');
      return withoutErased(
        forms
          .reduce((shown, form) => (CLEARS.test(form) ? form : form + shown.slice(form.length)), '')
          .replace(CLEARS, ''),
      );
    })
    .join('\n');
}

// biome-ignore lint/suspicious/noControlCharactersInRegex: the code that clears to the end of a line.
const CLEARS = /\u001b\[0?K/;

function withoutErased(line: string): string {
  let text = line;
  while (/[^\b][\b]/.test(text)) text = text.replace(/[^\b][\b]/g, '');
  return text.replace(/[\b]/g, '');
}
