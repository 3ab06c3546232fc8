import { createRequire } from 'node:module';
import type MarkdownIt from 'markdown-it';
import { escapeHtml } from '../quantity/present';

const requireHere = createRequire(import.meta.url);

/** What a text needs from its surroundings. */
export interface MarkdownContext {
  /** Address of a picture as a data URI; null when it is not at hand. */
  readonly picture: (address: string) => string | null;
  /** Called for each heading; returns the name under which it can be reached. */
  readonly heading: (level: number, text: string) => string;
}

/**
 * Markdown as HTML that makes no outside request: HTML in the text is shown as text, pictures must be at hand (others become
 * links), formulas between dollar signs become MathML.
 */
export function markdownHtml(text: string, context: MarkdownContext): string {
  return parser().render(text, { ...context });
}

type Parser = InstanceType<typeof MarkdownIt>;

let made: Parser | null = null;

/** Loaded with the first text: most kernels never write a report. */
function parser(): Parser {
  if (made !== null) return made;
  const loaded = requireHere('markdown-it') as typeof MarkdownIt & { default?: typeof MarkdownIt };
  const md = new (loaded.default ?? loaded)({ html: false, linkify: false });
  md.inline.ruler.before('escape', 'formula', (state, silent) => {
    const found = formulaAt(state.src, state.pos);
    if (found === null) return false;
    if (!silent) {
      const token = state.push('formula', 'math', 0);
      token.content = found.tex;
      token.markup = found.display ? '$$' : '$';
    }
    state.pos = found.end;
    return true;
  });
  md.renderer.rules['formula'] = (tokens, i) => mathHtml(tokens[i].content, tokens[i].markup === '$$');
  md.renderer.rules['image'] = (tokens, i, _options, env) => {
    const address = String(tokens[i].attrGet('src') ?? '');
    const label = escapeHtml(tokens[i].content);
    const picture = (env as unknown as MarkdownContext).picture(address);
    if (picture !== null) return `<img alt="${label}" src="${escapeHtml(picture)}">`;
    return `<a href="${escapeHtml(address)}">${label || escapeHtml(address)}</a>`;
  };
  md.renderer.rules['heading_open'] = (tokens, i, _options, env) => {
    const level = Number(tokens[i].tag.slice(1));
    const words = (tokens[i + 1].children ?? []).map((token) => token.content).join('');
    return `<${tokens[i].tag} id="${escapeHtml((env as unknown as MarkdownContext).heading(level, words))}">`;
  };
  made = md;
  return md;
}

/**
 * The formula that starts at a place: between double dollar signs, or between single ones that touch it and with no digit
 * after them, so that prices stay prices.
 */
export function formulaAt(text: string, start: number): { tex: string; display: boolean; end: number } | null {
  if (text[start] !== '$') return null;
  const display = text[start + 1] === '$';
  const from = start + (display ? 2 : 1);
  if (!display && /^\s/.test(text.slice(from, from + 1))) return null;
  for (let at = from; at < text.length; at++) {
    if (text[at] === '\\') {
      at++;
      continue;
    }
    if (text[at] !== '$') continue;
    const tex = text.slice(from, at);
    if (tex.trim() === '') return null;
    if (display) return text[at + 1] === '$' ? { tex, display, end: at + 2 } : null;
    return /\s$/.test(tex) || /\d/.test(text[at + 1] ?? '') ? null : { tex, display, end: at + 1 };
  }
  return null;
}

function mathHtml(tex: string, display: boolean): string {
  const loaded = requireHere('temml') as { default?: Temml } & Temml;
  return (loaded.default ?? loaded).renderToString(tex, { displayMode: display, throwOnError: false, trust: false });
}

interface Temml {
  renderToString(tex: string, options: object): string;
}
