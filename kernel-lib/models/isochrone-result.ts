import type { Band } from '../quantity/band';
import { htmlTable, presentable, textTable } from '../quantity/present';
import { PHASE, PHASE_NAMES } from './phases/phase';
import type { Isochrone } from './stellar-model';

/** What an isochrone was made for. */
export interface IsochroneSetting {
  readonly model: string;
  readonly logAge: number;
  readonly metallicity: number;
  readonly z: number;
  readonly bands: readonly Band[];
  readonly massLoss: string;
}

/** The columns of an isochrone. */
export interface IsochroneColumns {
  readonly initialMass: Float64Array;
  readonly mass: Float64Array;
  readonly logL: Float64Array;
  readonly logTeff: Float64Array;
  readonly logGravity: Float64Array;
  readonly phase: Uint8Array;
  readonly weight: Float64Array;
  readonly breaks: Uint32Array;
  readonly magnitudes: Partial<Record<Band, Float64Array>>;
}

/** Puts setting and columns together as a frozen result that shows itself. */
export function finishIsochrone(setting: IsochroneSetting, columns: IsochroneColumns, note: string): Isochrone {
  const { model, logAge, metallicity, z, massLoss } = setting;
  const iso: Isochrone = {
    model,
    logAge,
    metallicity,
    z,
    bands: setting.bands,
    count: columns.initialMass.length,
    initialMass: columns.initialMass,
    mass: columns.mass,
    logL: columns.logL,
    logTeff: columns.logTeff,
    logGravity: columns.logGravity,
    phase: columns.phase,
    phaseNames: PHASE_NAMES,
    weight: columns.weight,
    breaks: columns.breaks,
    magnitudes: Object.freeze(columns.magnitudes),
    massLoss,
    note,
  };
  return presentable(iso, {
    text: () => `${title(iso)}\n${textTable(HEAD, phaseRows(iso))}`,
    html: () => htmlTable(HEAD, phaseRows(iso), { caption: title(iso), numeric: [1, 2, 3, 4, 5] }),
  });
}

/** An isochrone without points, with the reason. */
export function emptyIsochrone(setting: IsochroneSetting, note: string): Isochrone {
  const none = () => new Float64Array(0);
  const magnitudes = Object.fromEntries(setting.bands.map((b) => [b, none()])) as Partial<Record<Band, Float64Array>>;
  const columns: IsochroneColumns = {
    initialMass: none(),
    mass: none(),
    logL: none(),
    logTeff: none(),
    logGravity: none(),
    phase: new Uint8Array(0),
    weight: none(),
    breaks: new Uint32Array(0),
    magnitudes,
  };
  return finishIsochrone(setting, columns, note);
}

const HEAD = ['phase', 'points', 'initial mass from', 'to', 'log L from', 'to'];

function title(iso: Isochrone): string {
  const age = 10 ** (iso.logAge - 9);
  const composition = `[Fe/H] ${iso.metallicity.toFixed(2)} (Z ${Number(iso.z.toPrecision(3))})`;
  const head = `Isochrone, ${iso.model}: log age ${Number(iso.logAge.toFixed(4))} (${Number(age.toPrecision(4))} Gyr), ${composition}`;
  const rest = `${iso.count} points; bands ${iso.bands.join(' ') || 'none'}; mass loss: ${iso.massLoss}`;
  return `${head}; ${rest}${iso.note === '' ? '' : `; ${iso.note}`}`;
}

function phaseRows(iso: Isochrone): string[][] {
  const rows: string[][] = [];
  for (let i = 0; i < iso.count; ) {
    let j = i;
    while (j + 1 < iso.count && iso.phase[j + 1] === iso.phase[i]) j++;
    rows.push([
      PHASE_NAMES[iso.phase[i]] ?? 'unlabelled',
      String(j - i + 1),
      iso.initialMass[i].toFixed(4),
      iso.initialMass[j].toFixed(4),
      iso.logL[i].toFixed(3),
      iso.logL[j].toFixed(3),
    ]);
    i = j + 1;
  }
  return rows;
}

/** Index of the last point of the main sequence, -1 without one. */
export function mainSequenceEnd(iso: Isochrone): number {
  let last = -1;
  for (let i = 0; i < iso.count; i++) if (iso.phase[i] === PHASE.mainSequence) last = i;
  return last;
}
