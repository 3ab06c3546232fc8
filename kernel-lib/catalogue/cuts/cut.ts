import type { Catalogue } from '../catalogue';

/** A cut: which rows stay, and what the history says about it. */
export interface Cut {
  /** In words with its numbers, for example `parallax / error >= 5`. */
  readonly description: string;
  /** Mask of shape (rowCount), 1 = stays, with a note such as how many rows had no value. */
  apply(catalogue: Catalogue): { mask: Uint8Array; note: string };
}
