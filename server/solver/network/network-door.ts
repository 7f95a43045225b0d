import type { FieldError } from '../../../shared/problem';
import type { EstimateDocument, RiverWater } from '../../../shared/schemas/estimate';
import { releaseProfile } from '../release-profile';

/** Between two rows of different discharge no more time may pass than this, s (common practice, no source): nobody knows what the river did between. */
const LONGEST_GAP_S = 6 * 3_600;

/** What of a river only the network solver can take, in words. */
export function networkFeatures(water: RiverWater): string[] {
  const has = (test: (reach: RiverWater['reaches'][number]) => unknown, words: string): string[] => (water.reaches.some(test) ? [words] : []);
  return [
    ...has((reach) => reach.storage, 'dead zones'),
    ...has((reach) => reach.structure, 'weirs or reservoirs'),
    ...has((reach) => reach.tide, 'tidal currents'),
    ...(water.flow.series && water.flow.series.length > 0 ? ['changing discharge'] : []),
  ];
}

/** Refuses series that do not cover the estimate, tides that do not go together, and the closed form where it cannot do. */
export function networkErrors(doc: EstimateDocument, water: RiverWater): FieldError[] {
  const features = networkFeatures(water);
  const errors = [...seriesErrors(doc, water), ...tideErrors(water)];
  if (doc.solver === 'closed-form' && features.length > 0)
    errors.push({ path: 'solver', message: `"closed-form" cannot take ${features.join(' and ')} of ${water.name}: choose "auto" or "network", or leave them out` });
  return errors;
}

function seriesErrors(doc: EstimateDocument, water: RiverWater): FieldError[] {
  const fromS = Math.min(0, ...doc.releases.map((release) => releaseProfile(release.timing).startS));
  const seen = new Set<string>();
  return (water.flow.series ?? []).flatMap(({ reachId, rows }, i): FieldError[] => {
    const path = `water.flow.series.${i}`;
    if (!water.reaches.some((reach) => reach.id === reachId)) return [{ path: `${path}.reachId`, message: `There is no reach ${reachId}: name a reach of ${water.name}` }];
    if (seen.has(reachId)) return [{ path: `${path}.reachId`, message: `Reach ${reachId} has two series: keep one` }];
    seen.add(reachId);
    const [first, last] = [rows[0]!.atS, rows[rows.length - 1]!.atS];
    if (first > fromS || last < doc.horizonS)
      return [{ path: `${path}.rows`, message: `The discharges run from ${first} s to ${last} s; the estimate needs ${fromS} s to ${doc.horizonS} s: add rows, or shorten the estimate` }];
    const gap = rows.findIndex((row, k) => k > 0 && row.atS - rows[k - 1]!.atS > LONGEST_GAP_S && Math.abs(row.dischargeM3s - rows[k - 1]!.dischargeM3s) > 0.01 * row.dischargeM3s);
    if (gap > 0)
      return [{ path: `${path}.rows.${gap}.atS`, message: `From ${rows[gap - 1]!.atS} s to ${rows[gap]!.atS} s the discharge goes from ${rows[gap - 1]!.dischargeM3s} to ${rows[gap]!.dischargeM3s} m³/s without a row between: give rows at most ${LONGEST_GAP_S / 3_600} h apart while it changes` }];
    return [];
  });
}

function tideErrors(water: RiverWater): FieldError[] {
  const first = water.reaches.find((reach) => reach.tide)?.tide;
  return water.reaches.flatMap((reach, i) =>
    reach.tide && first && reach.tide.periodS !== first.periodS
      ? [{ path: `water.reaches.${i}.tide.periodS`, message: `${reach.tide.periodS} s differs from the ${first.periodS} s of another tidal reach: give all tidal reaches one period` }]
      : [],
  );
}
