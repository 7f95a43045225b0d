import { describe, expect, it } from 'vitest';
import type { LonLat } from '../../shared/schemas/basics';
import { combinedClock, lossParts } from '../../server/solver/losses/loss-parts';
import { Meter } from '../../server/solver/meter';
import { planeArea } from '../../server/solver/open/area-mask';
import { openFacts } from '../../server/solver/open/open-solver';
import { walkPlane } from '../../server/solver/paths/plane-walk';
import { PathRandom } from '../../server/solver/paths/random';
import { Walls } from '../../server/solver/paths/walls';
import { resolveReleases, weightsOf } from '../../server/solver/release-profile';
import { receptorAnswer } from '../../server/solver/results/receptor-answer';
import { secondOpinion } from '../../server/solver/second-opinion/second-opinion';
import { solverFor } from '../../server/solver/solvers';
import type { RunInput } from '../../server/solver/types';
import type { EstimateDocument } from '../../shared/schemas/estimate';
import { at, openDocument, receptor, release } from './documents';

const ring = (radiusM: number, x = 0): LonLat[] => Array.from({ length: 25 }, (_, i) => at(x + radiusM * Math.cos((2 * Math.PI * (i % 24)) / 24), radiusM * Math.sin((2 * Math.PI * (i % 24)) / 24)));

/** A lake 6 km across with an island east of the middle and a river through it. */
const lake = (): EstimateDocument =>
  openDocument(
    {
      waterKind: 'lake',
      area: [ring(3_000), ring(300, 700)],
      current: [],
      throughflows: [
        { name: 'in', position: at(-3_000, 0), dischargeM3s: 400 },
        { name: 'out', position: at(3_000, 0), dischargeM3s: -400 },
      ],
      mixing: { kind: 'constant', alongM2s: 3, acrossM2s: 3 },
    },
    { horizonS: 172_800, releases: [release({ position: at(-500, 0) })], receptors: [receptor({ position: at(1_500, 300), actionValues: [{ value: 1e-7 }] })] },
  );

function prepared(doc: EstimateDocument) {
  const releases = resolveReleases(doc);
  const parts = lossParts(doc);
  // The coarse grid of a preview is enough here, and ten times as quick.
  const input: RunInput = { doc, releases, weights: weightsOf(releases), loss: combinedClock(parts), lossParts: parts, isPreview: true, tolerance: 1e-4, meter: new Meter() };
  return { input, field: solverFor(doc).prepare(input) };
}

describe('paths in a current between shores', () => {
  const doc = lake();
  const { input, field } = prepared(doc);

  it('agree with finite volumes on the same current, an independent method', () => {
    const answers = doc.receptors.map((one, i) => receptorAnswer(input, one, field.receptor(i, one)));
    const opinion = secondOpinion({ ...input, isPreview: false }, field, answers);
    expect(opinion.secondOpinion.agreement).toBe('agrees');
    // Sampling takes 5 %, the coarse cells and the counting area up to 10 % each.
    expect(Math.abs(opinion.secondOpinion.figures[0]!.peakRatio! - 1)).toBeLessThan(0.25);
    expect(opinion.secondOpinion.field!.overlap).toBeGreaterThan(0.85);
    expect(opinion.paths!.ashoreShare).toBe(0);
  });

  it('gather nowhere: an even lake stays even while what flows out leaves', () => {
    const facts = openFacts(input);
    const walls = new Walls(planeArea(doc.water.kind === 'open' ? doc.water.area : [], ...doc.releases[0]!.position));
    const motion = field.pathWater!.motionOf(facts.sources[0]!);
    const lattice: { x: number; y: number }[] = [];
    for (let x = -2_900; x <= 3_900; x += 60) for (let y = -2_900; y <= 2_900; y += 60) if (walls.isWater(x + 7, y + 11)) lattice.push({ x: x + 7, y: y + 11 });
    // North, south and middle thirds of the lake, away from inflow and outflow: x from -1,000 to 2,000 m east of the release.
    const part = (x: number, y: number): number => (x < -1_000 || x > 2_000 ? -1 : y > 900 ? 0 : y < -900 ? 1 : 2);
    const before = [0, 0, 0];
    const after = [0, 0, 0];
    lattice.forEach((start, path) => {
      const from = part(start.x, start.y);
      if (from >= 0) before[from]!++;
      walkPlane({ motion, walls, line: null, ...start, startVarianceM2: 0, birthsS: new Float64Array(1), timesS: [7_200], random: new PathRandom(path, 3), meter: input.meter }, [
        {
          seen(_k, x, y) {
            const to = part(x, y);
            if (to >= 0) after[to]!++;
          },
        },
      ]);
    });
    // In two hours the water moves by some 100 m; clean water from the inflow does not come this far.
    before.forEach((count, i) => expect(Math.abs(after[i]! - count), `part ${i}: ${count} before, ${after[i]} after`).toBeLessThan(4 * Math.sqrt(count)));
  });
});
