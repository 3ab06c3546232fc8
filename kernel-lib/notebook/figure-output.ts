import { createHash } from 'node:crypto';
import { type Figure, figureHtml } from '../diagrams/figure';
import { loaderKey } from './plotly-loader';

/**
 * A figure as the HTML of a cell output: a still picture, which is all that a page without scripts shows, and the data from
 * which Plotly draws in its place as soon as the page's loader is there. Makes no outside request.
 */
export function figureOutput(figure: Figure): string {
  // "<" could end the script that holds the data.
  const data = JSON.stringify(figure).replace(/</g, '\\u003c');
  // Named by content: the same notebook gives the same output again.
  const id = createHash('sha256').update(data).digest('hex').slice(0, 16);
  return (
    `<div data-fig="${id}" style="width:100%">${figureHtml(figure)}` +
    `<script type="application/json">${data}</script></div>` +
    `<script>(()=>{const k=${JSON.stringify(loaderKey())},draw=()=>globalThis[k].then(p=>p.draw("${id}"));` +
    'if(globalThis[k])draw();else addEventListener(k,draw,{once:true})})()</script>'
  );
}
