import { SPECTRAL_CLASSES } from '../photometry/spectral-class';
import { COMMON_AXIS } from './axes';
import type { HrView } from './equal-radii';
import { GUIDE } from './theme';

/** The letters of the spectral classes over the middle of the shown part of each, on an axis that moves with temperature. */
export function spectralAxis(view: HrView): Readonly<Record<string, unknown>> {
  const classes = SPECTRAL_CLASSES.map(({ letter, cool, hot }) => ({
    letter,
    low: Math.max(cool, view.cool),
    high: Math.min(hot, view.hot),
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
  return SPECTRAL_CLASSES.slice(0, -1)
    .map(({ cool }) => cool)
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
