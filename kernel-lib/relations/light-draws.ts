import type { Catalogue } from '../catalogue/catalogue';
import { bandExtinction, colourExcessRatio } from '../extinction/band-coefficients';
import { type Band, bandsOfColour, type ColourName } from '../quantity/band';
import { observedColour } from '../stars/observed-colour';

/** Photometry of all stars, drawn anew within its errors: bands drawn once serve every colour they are part of. */
export class LightDraws {
  readonly notes: string[] = [];
  private readonly bands = new Map<
    Band,
    { value: Float64Array; error: Float64Array; drawn: Float64Array; ratio: number }
  >();
  private readonly colours = new Map<ColourName, { value: Float64Array; error: Float64Array; drawn: Float64Array }>();

  constructor(
    private readonly caller: string,
    private readonly catalogue: Catalogue,
    private readonly dust: { readonly rV: number; readonly law: string },
  ) {
    // Every band and colour that the catalogue has is drawn, in a fixed order, so that draws do not depend on what is asked.
    for (const role of Object.keys(catalogue.roles).sort()) {
      const [kind, name, more] = role.split('.');
      if (more !== undefined) continue;
      if (kind === 'magnitude') this.addBand(name as Band);
      if (kind === 'colour') this.addColour(name as ColourName);
    }
  }

  draw(random: { normal(): number }): void {
    for (const { value, error, drawn } of this.bands.values()) {
      for (let i = 0; i < drawn.length; i++) drawn[i] = value[i] + error[i] * random.normal();
    }
    for (const { value, error, drawn } of this.colours.values()) {
      for (let i = 0; i < drawn.length; i++) drawn[i] = value[i] + error[i] * random.normal();
    }
  }

  magnitude(band: Band, ebv: number): Float64Array {
    const entry = this.bands.get(band);
    if (entry === undefined) {
      throw new Error(`${this.caller}: ${this.catalogue.source} has no magnitude.${band}; give its role when reading.`);
    }
    const extinction = entry.ratio * this.dust.rV * ebv;
    return entry.drawn.map((m) => m - extinction);
  }

  colour(colour: ColourName, ebv: number): Float64Array {
    const excess = colourExcessRatio(colour, this.dust) * ebv;
    const entry = this.colours.get(colour);
    if (entry !== undefined) return entry.drawn.map((c) => c - excess);
    const { blue, red } = bandsOfColour(colour);
    const [b, r] = [this.bands.get(blue), this.bands.get(red)];
    // Says which of the two is missing.
    if (b === undefined || r === undefined) return observedColour(this.caller, this.catalogue, colour).values;
    return b.drawn.map((m, i) => m - r.drawn[i] - excess);
  }

  private addBand(band: Band): void {
    const value = this.catalogue.numbers(`magnitude.${band}`);
    const error = this.errors(`magnitude.${band}`, band);
    this.bands.set(band, { value, error, drawn: value.slice(), ratio: bandExtinction(band, this.dust) });
  }

  private addColour(colour: ColourName): void {
    const value = this.catalogue.numbers(`colour.${colour}`);
    this.colours.set(colour, { value, error: this.errors(`colour.${colour}`, colour), drawn: value.slice() });
  }

  private errors(role: string, name: string): Float64Array {
    if (this.catalogue.has(`${role}.error`)) return this.catalogue.numbers(`${role}.error`).map((e) => e || 0);
    this.notes.push(`Errors of ${name} are not given: it counts as exact.`);
    return new Float64Array(this.catalogue.rowCount);
  }
}
