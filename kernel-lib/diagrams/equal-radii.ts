import { SOLAR_TEMPERATURE } from '../quantity/constants';
import type { FigureTrace } from './figure';
import { GUIDE } from './theme';

/** The shown part of an HR diagram: K from hot (left) to cool, solar luminosities from faint to bright. */
export interface HrView {
  readonly hot: number;
  readonly cool: number;
  readonly faint: number;
  readonly bright: number;
}

/** Powers of ten from 0.01 (white dwarfs) to 1000 (supergiants) solar radii whose lines cross a view. */
export function crossingRadii(view: HrView): number[] {
  const radii: number[] = [];
  for (let e = -2; e <= 3; e++)
    if (luminosityAt(10 ** e, view.hot) > view.faint && luminosityAt(10 ** e, view.cool) < view.bright)
      radii.push(Number(`1e${e}`));
  return radii;
}

/**
 * Lines of equal radius over a view, one trace (two points a line: on logarithmic axes they are straight), and a label for
 * each where it comes in at the hot side or at the top.
 * @param radii solar radii
 */
export function equalRadii(radii: readonly number[], view: HrView): { trace: FigureTrace; labels: object[] } {
  const x: (number | null)[] = [];
  const y: (number | null)[] = [];
  const labels: object[] = [];
  for (const radius of radii) {
    const ends = [view.hot, view.cool].map((t) => luminosityAt(radius, t));
    x.push(Math.round(view.hot), Math.round(view.cool), null);
    y.push(Number(ends[0].toPrecision(4)), Number(ends[1].toPrecision(4)), null);
    labels.push(...label(radius, ends[0], view));
  }
  const trace = {
    type: 'scatter',
    mode: 'lines',
    name: 'equal radius',
    x,
    y,
    line: { color: GUIDE, width: 1, dash: 'dot' },
    hoverinfo: 'skip',
  };
  return { trace, labels };
}

function label(radius: number, atHotEnd: number, view: HrView): object[] {
  const entersAtSide = atHotEnd <= view.bright;
  const temperature = entersAtSide ? view.hot : SOLAR_TEMPERATURE * (view.bright / radius ** 2) ** 0.25;
  const luminosity = entersAtSide ? atHotEnd : view.bright;
  if (luminosity < view.faint || temperature < view.cool) return [];
  // A label needs room along the line: none in the corner at the bottom left, and none at the far end of the top.
  const height = Math.log10(luminosity / view.faint) / Math.log10(view.bright / view.faint);
  const along = Math.log10(view.hot / temperature) / Math.log10(view.hot / view.cool);
  if (height < 0.03 || along > 0.93) return [];
  return [
    {
      x: round(Math.log10(temperature)),
      y: round(Math.log10(luminosity)),
      text: `${radius} R\u2609`,
      showarrow: false,
      xanchor: 'left',
      yanchor: entersAtSide ? 'bottom' : 'top',
      xshift: entersAtSide ? 5 : 8,
      yshift: entersAtSide ? -2 : -3,
      font: { size: 11 },
    },
  ];
}

function luminosityAt(radius: number, temperature: number): number {
  return radius ** 2 * (temperature / SOLAR_TEMPERATURE) ** 4;
}

function round(value: number): number {
  return Math.round(value * 1e4) / 1e4;
}
