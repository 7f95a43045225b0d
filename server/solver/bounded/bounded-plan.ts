import type { OpenWater } from '../../../shared/schemas/estimate';
import type { OpenFacts } from '../open/open-solver';
import { currentOf } from '../open/current';
import { assertBalanced, boundedWater, type BoundedWater, type PlanePoint, type ToPlane } from './bounded-water';
import { FEWEST_CELLS, LAND } from './cell-grid';
import { BoundedFlow, flowModes, type Level } from './flow-modes';
import { fastestLoss } from './transport';

/** Cells along the longer side of the water. */
const CELLS_ALONG = { full: 160, preview: 64 };
/** Cells times steps times fields that a run may take: about 20 s, a preview 0.2 s. */
const MOST_WORK = { full: 2e8, preview: 1.6e6 };
/** Stored cells of all frames of all releases: 4 bytes each. */
const MOST_STORED = 4e7;
const COURANT = 0.45;
const M2_S = 44_714;
/** Times at which the speed of a changing current is looked at to judge the work. */
const SPEED_SAMPLES = 24;

export type BoundedPlan = { readonly water: BoundedWater; readonly flow: BoundedFlow; readonly fastestMps: number };

export const levelOf = (water: OpenWater): Level => ({
  amplitudeM: (water.openEdge?.tideRangeM ?? 0) / 2,
  periodS: water.openEdge?.periodS ?? M2_S,
  highWaterS: water.openEdge?.highWaterS ?? 0,
});

/** Grid and current of a water, as fine as the work allows. The work is counted, not timed: the same document has the same grid everywhere. */
export function boundedPlan(facts: OpenFacts, toXy: ToPlane, releases: readonly PlanePoint[], fields: number): BoundedPlan {
  const { water, input, area } = facts;
  const kind = input.isPreview ? 'preview' : 'full';
  const startS = Math.min(0, ...input.releases.map((release) => release.profile.startS));
  const spanS = input.doc.horizonS - startS;
  let cells = Math.min(CELLS_ALONG[kind], Math.max(FEWEST_CELLS, Math.floor(Math.sqrt(MOST_STORED / (input.doc.frameCount * input.releases.length)))));
  for (;;) {
    input.meter.assertWanted();
    const made = boundedWater(water, area, toXy, releases, cells);
    assertBalanced(made, water, spanS);
    const level = levelOf(water);
    const measured = (water.measuredCurrents ?? []).map(({ position, eastMps, northMps }) => ({ ...toXy(position), eastMps, northMps }));
    const modes = flowModes({ water: made, parts: water.current, measured, releases, hasTide: level.amplitudeM > 0 });
    const flow = new BoundedFlow(made, modes, currentOf(water.current), level);
    const speed = speedsOf(flow, startS, spanS);
    const wet = made.grid.isWater.reduce((sum, mark) => sum + mark, 0);
    const work = wet * fields * Math.max((spanS * speed.perS) / COURANT, spanS / flow.slowS, 50);
    if (work <= MOST_WORK[kind] || cells <= FEWEST_CELLS) return { water: made, flow, fastestMps: speed.fastestMps };
    // Work grows with the cube of the cells along a side: cells twice, steps once.
    cells = Math.max(FEWEST_CELLS, Math.min(cells - 4, Math.floor(0.97 * cells * Math.cbrt(MOST_WORK[kind] / work))));
  }
}

/** Mean over the run of the fastest renewal of any cell, 1/s, and the fastest speed, m/s. */
function speedsOf(flow: BoundedFlow, startS: number, spanS: number): { perS: number; fastestMps: number } {
  const { grid, thicknessM } = flow.water;
  const volume = thicknessM.map((thickness, cell) => (grid.isWater[cell] === LAND ? 1 : thickness * grid.dxM ** 2));
  const samples = flow.isSteady ? 1 : SPEED_SAMPLES;
  let [sum, most] = [0, 0];
  for (let n = 0; n < samples; n++) {
    const fromS = startS + (spanS * n) / samples;
    // A short span: the current at one time.
    flow.meanOver(fromS, fromS + Math.min(spanS / samples, 60));
    const { perS } = fastestLoss(grid, flow.now, volume);
    sum += perS / samples;
    most = Math.max(most, perS);
  }
  return { perS: sum, fastestMps: most * grid.dxM };
}
