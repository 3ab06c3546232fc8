import { extent } from 'd3-array';
import { scaleLinear, scaleLog } from 'd3-scale';
import type { AxisSpec, TraceSpec } from './plotly-subset';

/** The rectangle that axes fill, px. */
export interface Area {
  readonly left: number;
  readonly top: number;
  readonly width: number;
  readonly height: number;
}

/** An axis of the figure before it has a place on the page. */
export interface AxisPlan {
  /** `x`, `x2`, `y`, ... as traces name it. */
  readonly id: string;
  readonly spec: AxisSpec;
  readonly horizontal: boolean;
  readonly logarithmic: boolean;
  /** Ends in axis units: log10 of the value on a logarithmic axis. The first is at the left or at the bottom. */
  readonly range: readonly [number, number];
  readonly domain: readonly [number, number];
  readonly side: 'top' | 'bottom' | 'left' | 'right';
  readonly anchor: string;
  readonly ticks: readonly Tick[];
}

export interface Tick {
  /** Data value. */
  readonly value: number;
  readonly label: string;
}

/** An axis in its place: data value to px. */
export interface PlacedAxis extends AxisPlan {
  readonly start: number;
  readonly end: number;
  /** px of a data value; NaN where the axis has no such value. */
  toPx(value: number): number;
}

/** Every axis of a figure with range and ticks. */
export function planAxes(data: readonly TraceSpec[], layout: object): Map<string, AxisPlan> {
  const specs = new Map<string, AxisSpec>([
    ['x', {}],
    ['y', {}],
  ]);
  for (const [key, spec] of Object.entries(layout)) {
    const match = /^([xy])axis(\d*)$/.exec(key);
    if (match) specs.set(match[1] + match[2], spec as AxisSpec);
  }
  const plans = new Map<string, AxisPlan>();
  for (const [id, spec] of specs) plans.set(id, planAxis(id, spec, specs, data));
  return plans;
}

function planAxis(
  id: string,
  spec: AxisSpec,
  specs: ReadonlyMap<string, AxisSpec>,
  data: readonly TraceSpec[],
): AxisPlan {
  const horizontal = id[0] === 'x';
  const logarithmic = spec.type === 'log';
  const twin = spec.matches ? specs.get(spec.matches) : undefined;
  const range = spec.range ?? twin?.range ?? dataRange(id, spec, data, logarithmic);
  const under = spec.overlaying ? specs.get(spec.overlaying) : undefined;
  return {
    id,
    spec,
    horizontal,
    logarithmic,
    range,
    domain: spec.domain ?? under?.domain ?? [0, 1],
    side: spec.side ?? (horizontal ? 'bottom' : 'left'),
    anchor: spec.anchor ?? (horizontal ? 'y' : 'x'),
    ticks: spec.visible === false ? [] : ticksOf(spec, range, logarithmic),
  };
}

function dataRange(id: string, spec: AxisSpec, data: readonly TraceSpec[], logarithmic: boolean): [number, number] {
  const horizontal = id[0] === 'x';
  const values: number[] = [];
  for (const trace of data) {
    if ((horizontal ? (trace.xaxis ?? 'x') : (trace.yaxis ?? 'y')) !== id || trace.visible === false) continue;
    const [low, high] = extent((horizontal ? trace.x : trace.y) ?? [], (v) =>
      v === null || (logarithmic && v <= 0) ? Number.NaN : v,
    );
    if (low !== undefined && high !== undefined) values.push(low, high);
    if (trace.type === 'bar' && !horizontal) values.push(0);
  }
  let [low, high] = extent(logarithmic ? values.map(Math.log10) : values) as [number | undefined, number | undefined];
  low ??= 0;
  high ??= 1;
  const pad = low === high ? 0.5 : (high - low) * 0.05;
  const ends: [number, number] = [low - pad, high + pad];
  return spec.autorange === 'reversed' ? [ends[1], ends[0]] : ends;
}

/** Ticks as the figure gives them, else round numbers; only those within the range. */
export function ticksOf(spec: AxisSpec, range: readonly [number, number], logarithmic: boolean): Tick[] {
  if (spec.showticklabels === false && spec.tickvals === undefined) return [];
  const low = Math.min(range[0], range[1]);
  const high = Math.max(range[0], range[1]);
  if (spec.tickvals) {
    const slack = (high - low) * 1e-6;
    return spec.tickvals
      .map((value, i) => ({ value, label: spec.ticktext?.[i] ?? String(value) }))
      .filter(({ value }) => {
        const at = logarithmic ? Math.log10(value) : value;
        return at >= low - slack && at <= high + slack;
      });
  }
  const count = spec.nticks ?? 7;
  const scale = logarithmic ? scaleLog().domain([10 ** low, 10 ** high]) : scaleLinear().domain([low, high]);
  const format = scale.tickFormat(count, logarithmic ? '~g' : undefined);
  return scale
    .ticks(count)
    .map((value) => ({ value, label: format(value) }))
    .filter((t) => t.label !== '');
}

/** Puts an axis on the page. */
export function placeAxis(plan: AxisPlan, area: Area, range: readonly [number, number] = plan.range): PlacedAxis {
  const [from, to] = plan.domain;
  const start = plan.horizontal ? area.left + from * area.width : area.top + (1 - from) * area.height;
  const end = plan.horizontal ? area.left + to * area.width : area.top + (1 - to) * area.height;
  const perUnit = (end - start) / (range[1] - range[0]);
  const toPx = plan.logarithmic
    ? (value: number) => (value > 0 ? start + (Math.log10(value) - range[0]) * perUnit : Number.NaN)
    : (value: number) => start + (value - range[0]) * perUnit;
  const ticks = range === plan.range ? plan.ticks : ticksOf(plan.spec, range, plan.logarithmic);
  return { ...plan, range, ticks, start, end, toPx };
}

/**
 * Places all axes. An axis with `scaleanchor` and the one it names get the same px a unit (times `scaleratio`): the one
 * drawn too large gets a wider range about its middle.
 */
export function placeAxes(plans: ReadonlyMap<string, AxisPlan>, area: Area): Map<string, PlacedAxis> {
  const ranges = new Map<string, readonly [number, number]>();
  for (const plan of plans.values()) {
    const other = plan.spec.scaleanchor ? plans.get(plan.spec.scaleanchor) : undefined;
    if (!other) continue;
    const ratio = plan.spec.scaleratio ?? 1;
    const own = unitPx(plan, area) / ratio;
    const others = unitPx(other, area);
    if (own > others) ranges.set(plan.id, widen(plan.range, own / others));
    else ranges.set(other.id, widen(other.range, others / own));
  }
  const placed = new Map<string, PlacedAxis>();
  for (const plan of plans.values()) {
    const range = ranges.get(plan.id) ?? (plan.spec.matches ? ranges.get(plan.spec.matches) : undefined);
    placed.set(plan.id, placeAxis(plan, area, range ?? plan.range));
  }
  return placed;
}

function unitPx(plan: AxisPlan, area: Area): number {
  const length = (plan.horizontal ? area.width : area.height) * (plan.domain[1] - plan.domain[0]);
  return length / Math.abs(plan.range[1] - plan.range[0]);
}

function widen(range: readonly [number, number], factor: number): [number, number] {
  const middle = (range[0] + range[1]) / 2;
  return [middle + (range[0] - middle) * factor, middle + (range[1] - middle) * factor];
}
