import type { Band } from '../quantity/band';
import type { Composition } from './metallicity';

/** What to ask of a model. */
export interface IsochroneOptions extends Composition {
  /** log10 of the age in years. */
  readonly logAge: number;
  /** Bands in which to give absolute magnitudes; default G, BP and RP. */
  readonly bands?: readonly Band[];
  /** Number of points, default 400. */
  readonly points?: number;
}

/** Stars of one age and composition, ordered along their curve by initial mass. All columns have `count` entries. */
export interface Isochrone {
  /** Name of the model it comes from. */
  readonly model: string;
  /** log10 of the age in years. */
  readonly logAge: number;
  /** [Fe/H], dex. */
  readonly metallicity: number;
  /** Mass fraction of elements heavier than helium. */
  readonly z: number;
  readonly bands: readonly Band[];
  readonly count: number;
  /** Solar masses, never falling. */
  readonly initialMass: Float64Array;
  /** Solar masses at this age. */
  readonly mass: Float64Array;
  /** log10 of solar luminosities. */
  readonly logL: Float64Array;
  /** log10 of K. */
  readonly logTeff: Float64Array;
  /** log10 of cm/s2. */
  readonly logGravity: Float64Array;
  /** Numbers into `phaseNames`. */
  readonly phase: Uint8Array;
  readonly phaseNames: readonly string[];
  /**
   * Span of initial mass that a point stands for, solar masses: the number of stars near point i is weight[i] times the
   * initial mass function at initialMass[i].
   */
  readonly weight: Float64Array;
  /** Indices at which a new unbroken piece of the curve starts (0 first): no star lies between breaks[k] - 1 and breaks[k]. */
  readonly breaks: Uint32Array;
  /** Absolute magnitudes. */
  readonly magnitudes: Partial<Record<Band, Float64Array>>;
  /** The choice of mass loss. */
  readonly massLoss: string;
  /** Why it is empty or what to know about it, or ''. */
  readonly note: string;
}

/** Anything that gives isochrones: the built-in fits or a user's own tables. */
export interface StellarModel {
  /** Short name, shown in results. */
  readonly name: string;
  /** What it is and where it comes from, a sentence or two. */
  readonly description: string;
  /** Least and greatest log10 of the age in years. */
  readonly logAgeRange: readonly [number, number];
  /** Least and greatest [Fe/H], dex. */
  readonly metallicityRange: readonly [number, number];
  /** Bands it can give. */
  readonly bands: readonly Band[];
  /** An isochrone; with count 0 and a note outside the ranges. */
  isochrone(options: IsochroneOptions): Isochrone;
}
