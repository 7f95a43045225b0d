import { MonotoneSeries } from './monotone-series';
import type { TracerField } from './tracer-field';

/** Cells a place reads from, with their weights; they sum to one. */
export type SiteCells = readonly { readonly cell: number; readonly weight: number }[];

/** Most numbers kept for all receptors of a run: 8 bytes each. */
const MOST_NUMBERS = 4e6;
const MOST_RECORDS = { full: 1_500, preview: 300 };
const FEWEST_RECORDS = 100;

/** Concentrations at places against time, for each field. */
export class SiteRecorder {
  private readonly timesS: Float64Array;
  private readonly values: Float64Array;
  private count = 0;
  private nextS: number;
  private readonly strideS: number;

  constructor(private readonly sites: readonly SiteCells[], private readonly fields: readonly TracerField[], startS: number, horizonS: number, isPreview: boolean) {
    const numbers = sites.length * fields.length;
    const most = Math.min(MOST_RECORDS[isPreview ? 'preview' : 'full'], Math.max(FEWEST_RECORDS, Math.floor(MOST_NUMBERS / Math.max(1, numbers))));
    this.strideS = (horizonS - startS) / most;
    this.nextS = startS;
    this.timesS = new Float64Array(most + 3);
    this.values = new Float64Array((most + 3) * numbers);
  }

  /** Records where a record is due, and always when `isLast`. */
  record(timeS: number, isLast: boolean): void {
    if (timeS < this.nextS && !isLast) return;
    this.nextS = timeS + this.strideS;
    const { sites, fields, values } = this;
    this.timesS[this.count] = timeS;
    let at = this.count * sites.length * fields.length;
    for (const field of fields) {
      for (const site of sites) {
        let sum = 0;
        for (const { cell, weight } of site) sum += weight * field.c[cell]!;
        values[at++] = sum;
      }
    }
    this.count++;
  }

  series(site: number, field: number): MonotoneSeries {
    const stride = this.sites.length * this.fields.length;
    const offset = field * this.sites.length + site;
    return new MonotoneSeries(this.timesS.subarray(0, this.count), Float64Array.from({ length: this.count }, (_, n) => this.values[n * stride + offset]!));
  }
}
