import { escapeHtml } from '../quantity/present';
import { joined, type NotebookOutput } from './notebook-json';
import { terminalHtml } from './terminal-text';

/** How the parts of a bundle that need help are shown. */
export interface OutputContext {
  /** Markdown as HTML. */
  readonly markdown: (text: string) => string;
  /** HTML as it goes into the page. */
  readonly html: (html: string) => string;
}

/** Tags that could send the reader elsewhere or change where addresses lead; no policy of the page stops the first. */
const LEAVING = /<\/?(?:meta|base)\b[^>]*>/gi;

const PICTURES = ['image/png', 'image/jpeg', 'image/gif', 'image/webp'];

/** One output of a cell as HTML, in the best form that the page can show without help; empty when it shows nothing. */
export function outputHtml(output: NotebookOutput, context: OutputContext): string {
  if (output.output_type === 'error') return errorHtml(output);
  if (output.output_type === 'stream') return streamHtml(output);
  const data = output.data ?? {};
  const has = (type: string) => joined(data[type]).trim() !== '';
  if (has('text/html')) {
    const html = context.html(joined(data['text/html'])).replace(LEAVING, '');
    return html.trim() === '' ? '' : `<div class="output">${html}</div>`;
  }
  if (has('image/svg+xml')) {
    const svg = Buffer.from(joined(data['image/svg+xml'])).toString('base64');
    return `<div class="output"><img alt="" src="data:image/svg+xml;base64,${svg}"></div>`;
  }
  const picture = PICTURES.find(has);
  if (picture) {
    const bytes = joined(data[picture]).replace(/\s/g, '');
    const label = escapeHtml(joined(data['text/plain']));
    return `<div class="output"><img alt="${label}" src="data:${picture};base64,${escapeHtml(bytes)}"></div>`;
  }
  if (has('text/markdown')) return `<div class="output">${context.markdown(joined(data['text/markdown']))}</div>`;
  if (has('text/latex')) return `<div class="output">${context.markdown(joined(data['text/latex']))}</div>`;
  const text = has('text/plain') ? joined(data['text/plain']) : joined(data['application/json']);
  return text.trim() === '' ? '' : `<pre class="output">${terminalHtml(text)}</pre>`;
}

/** Whether an output tells of an error. The kernel prints errors on its error stream and marks them in no other way. */
export function isError(output: NotebookOutput): boolean {
  if (output.output_type === 'error') return true;
  if (output.output_type !== 'stream' || output.name !== 'stderr') return false;
  const text = joined(output.text);
  if (/^\s+at .*evalmachine/m.test(text)) return true;
  // The compiler's form; a log line may look like it, so all lines must.
  const lines = text.split('\n').filter((line) => line.trim() !== '');
  return lines.length > 0 && lines.every((line) => /^(?:\S+ )?\d+:\d+ - /.test(line));
}

function streamHtml(output: NotebookOutput): string {
  const text = joined(output.text);
  if (text.trim() === '') return '';
  if (isError(output)) return `<pre class="output error" role="alert">${terminalHtml(text)}</pre>`;
  return `<pre class="output${output.name === 'stderr' ? ' warning' : ''}">${terminalHtml(text)}</pre>`;
}

function errorHtml(output: NotebookOutput): string {
  const trace = output.traceback?.length ? output.traceback.join('\n') : `${output.ename}: ${output.evalue}`;
  return `<pre class="output error" role="alert">${terminalHtml(trace)}</pre>`;
}
