import { COMMON_AXIS } from './axes';
import type { HrView } from './equal-radii';
import { GUIDE } from './theme';

const BOUNDARIES: readonly { readonly letter: string; readonly from: number; readonly to: number }[] = [
  { letter: 'O', from: 31650, to: 60000 },
  { letter: 'B', from: 10050, to: 31650 },
  { letter: 'A', from: 7310, to: 10050 },
  { letter: 'F', from: 5960, to: 7310 },
  { letter: 'G', from: 5310, to: 5960 },
  { letter: 'K', from: 3890, to: 5310 },
  { letter: 'M', from: 2300, to: 3890 },
];

/** The letters of the spectral classes over the middle of the shown part of each, on an axis that moves with temperature. */
export function spectralAxis(view: HrView): Readonly<Record<string, unknown>> {
  const classes = BOUNDARIES.map(({ letter, from, to }) => ({
    letter,
    low: Math.max(from, view.cool),
    high: Math.min(to, view.hot),
  })).filter(({ low, high }) => Math.log10(high / low) > 0.015 * Math.log10(view.hot / view.cool));
  return {
    ...COMMON_AXIS,
    type: 'log',
    range: [view.hot, view.cool].map((t) => Math.round(Math.log10(t) * 1e4) / 1e4),
    overlaying: 'x',
    matches: 'x',
    side: 'top',
    title: { text: 'spectral class (dwarfs)', standoff: 6, font: { size: 12 } },
    showgrid: false,
    ticks: '',
    tickmode: 'array',
    tickvals: classes.map(({ low, high }) => Math.round(Math.sqrt(low * high))),
    ticktext: classes.map(({ letter }) => `<b>${letter}</b>`),
  };
}

/** Short marks on the top edge where one class gives way to the next. */
export function spectralBoundaries(view: HrView): object[] {
  return BOUNDARIES.map(({ from }) => from)
    .filter((t) => t > view.cool && t < view.hot)
    .map((t) => ({
      type: 'line',
      x0: t,
      x1: t,
      y0: 1,
      y1: 1.025,
      yref: 'paper',
      line: { color: GUIDE, width: 1.5, dash: 'solid' },
    }));
}
