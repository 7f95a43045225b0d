import { toPlane } from '../../../shared/geo';
import type { EstimateDocument, OpenWater } from '../../../shared/schemas/estimate';
import { currentOf } from '../open/current';
import { nearestShore, planeArea, type PlaneArea } from '../open/area-mask';
import { agedVariance } from '../open/spread';
import { releaseProfile } from '../release-profile';

/** An island nearer to the middle of a cloud than this many standard deviations splits or holds it. */
const NEAR_SIGMA = 2;
const SAMPLES = 48;

/** What of an open water only the grid can take, in words. */
export function boundedFeatures(doc: EstimateDocument, water: OpenWater): string[] {
  return [
    ...(water.throughflows?.length ? ['streams'] : []),
    ...(water.openEdge ? ['an open edge'] : []),
    ...(water.measuredCurrents?.length ? ['measured currents'] : []),
    ...(water.depthPoints?.length ? ['soundings'] : []),
    ...(hasIslandInTheWay(doc, water) ? ['islands in the way of the cloud'] : []),
  ];
}

/** In closed waters, whose outline is shore all round: a cloud that meets an island on its way. */
function hasIslandInTheWay(doc: EstimateDocument, water: OpenWater): boolean {
  if (water.area.length < 2 || water.straightShore || (water.waterKind !== 'lake' && water.waterKind !== 'harbour')) return false;
  const [originLon, originLat] = doc.releases[0]!.position;
  const { rings } = planeArea(water.area, originLon, originLat);
  const islands: PlaneArea = { rings: rings.slice(1), x0: 0, y0: 0, x1: 0, y1: 0, areaM2: 0 };
  const current = currentOf(water.current);
  const [from, to] = [new Float64Array(2), new Float64Array(2)];
  return doc.releases.some(({ position, timing, initialRadiusM }) => {
    const { startS } = releaseProfile(timing);
    const [x, y] = toPlane({ originLon, originLat }, position);
    current.displacement(startS, from);
    for (let n = 0; n <= SAMPLES; n++) {
      const ageS = ((doc.horizonS - startS) * n) / SAMPLES;
      current.displacement(startS + ageS, to);
      const variance = initialRadiusM ** 2 / 4 + varianceOf(water, ageS);
      if (nearestShore(islands, x + to[0]! - from[0]!, y + to[1]! - from[1]!).distanceM < NEAR_SIGMA * Math.sqrt(variance)) return true;
    }
    return false;
  });
}

const varianceOf = ({ mixing }: OpenWater, ageS: number): number =>
  mixing.kind === 'constant' ? 2 * Math.max(mixing.alongM2s, mixing.acrossM2s) * ageS : agedVariance(mixing)!(ageS, 0);
