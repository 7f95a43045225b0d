import { describe, expect, it } from 'vitest';
import { Meter } from '../../server/solver/meter';
import { channelReaches, walkChannel, type ChannelPoint, type ChannelReach } from '../../server/solver/paths/channel-walk';
import { ChannelKernel, ChannelWatch } from '../../server/solver/paths/channel-watch';
import { PathRandom } from '../../server/solver/paths/random';
import { betweenWalls } from '../../server/solver/physics/two-walls';
import { passedShare } from '../../server/solver/physics/line';
import { reachStates } from '../../server/solver/river/reach-state';
import { at, reachOf, riverDocument, type ReachFigures } from './documents';

const FOUR = 4;

function reachesOf(figures: (ReachFigures & { into?: string; bank?: 'left' | 'right' })[]): ChannelReach[] {
  const doc = riverDocument(
    figures.map(({ into, bank, ...reach }) => reachOf(reach, { downstreamReachId: into ?? null, joinsOnBank: bank ?? null })),
    { releases: [{ id: 'a', name: 'Release', position: at(0, 0), channel: { reachId: figures[0]!.id, chainageKm: figures[0]!.lengthKm, bank: 'left' }, timing: { kind: 'instantaneous' }, amount: { how: 'mass', massKg: { likely: 1 } } }] },
  );
  if (doc.water.kind !== 'river') throw new Error('a river document holds a river');
  return channelReaches(reachStates(doc.water));
}

function walk(reaches: ChannelReach[], start: ChannelPoint, timesS: number[], n: number, watch: ChannelWatch[] = [], seed = 1): ChannelPoint[] {
  const out: ChannelPoint[] = [];
  walkChannel({ reaches, start, startAlongS2: 0, startAcross: 0, birthsS: new Float64Array(n), timesS, random: new PathRandom(seed, 0), meter: new Meter() }, [...watch, { seen: (k, point) => void (k === timesS.length - 1 && out.push({ ...point })) }]);
  return out;
}

const even: ReachFigures = { id: 'a', lengthKm: 60, Q: 30, W: 60, H: 1, U: 0.5, D: 30, e: 0.06 };

describe('paths in a channel', () => {
  const n = 20_000;

  it('move with the water and spread by 2 D t along it', () => {
    const places = walk(reachesOf([even]), { reach: 0, atS: 40_000, eta: 0 }, [5_000, 12_000], n);
    const x = places.map(({ atS }) => (atS - 40_000) * even.U);
    const mean = x.reduce((sum, value) => sum + value, 0) / n;
    const variance = x.reduce((sum, value) => sum + (value - mean) ** 2, 0) / n;
    expect(Math.abs(mean - 6_000)).toBeLessThan(FOUR * Math.sqrt((2 * 30 * 12_000) / n));
    expect(Math.abs(variance / (2 * 30 * 12_000) - 1)).toBeLessThan(FOUR * Math.sqrt(2 / n));
  });

  it.each([
    // Relative concentration across at e t / W^2 (images and cosine series, Fischer et al. 1979, section 5.1.3).
    { eta0: 0, tau: 0.02, left: 3.98942280401, mid: 0.175283004938, right: 2.97343902947e-5 },
    { eta0: 0, tau: 0.1, left: 1.78428611437, mid: 0.961407671463, right: 0.292899651842 },
    { eta0: 0.3, tau: 0.02, left: 1.29517595666, mid: 1.2105228041, right: 0.00872682962001 },
    { eta0: 0.3, tau: 0.1, left: 1.42595437772, mid: 1.01192554673, right: 0.550193631515 },
    { eta0: 0.3, tau: 0.4, left: 1.02268407886, mid: 1.00000008569, right: 0.977315749764 },
  ])('mix across from $eta0 of the width to the exact profile at tau $tau', ({ eta0, tau, left, mid, right }) => {
    [left, mid, right].forEach((value, i) => expect(betweenWalls(i / 2, eta0, tau)).toBeCloseTo(value, 9));
    const lastS = (tau * 60 * 60) / 0.06;
    const places = walk(reachesOf([{ ...even, D: 1 }]), { reach: 0, atS: 0, eta: eta0 }, [lastS / 3, lastS], n);
    const bins = 10;
    const counts = new Array<number>(bins).fill(0);
    for (const { eta } of places) counts[Math.min(bins - 1, Math.floor(eta * bins))]!++;
    counts.forEach((count, i) => {
      // Mean of the exact profile over the bin, by the midpoint rule on 200 points (1e-5 of it).
      const wanted = Array.from({ length: 200 }, (_, k) => betweenWalls((i + (k + 0.5) / 200) / bins, eta0, tau)).reduce((sum, value) => sum + value, 0) / 200 / bins;
      expect(Math.abs(count / n - wanted), `bin ${i}`).toBeLessThan(FOUR * Math.sqrt((wanted * (1 - wanted)) / n) + 1e-5);
    });
  });

  it('first pass a section by the inverse Gaussian, with few long steps', () => {
    const reaches = reachesOf([even]);
    const place = { reach: 0, atS: 20_000, eta: 0 };
    const watch = new ChannelWatch(new ChannelKernel(place, reaches, 100, 0.3), reaches, 3, n, () => 1, new PathRandom(1, 1_000));
    walk(reaches, { reach: 0, atS: 0, eta: 0 }, [9_000, 21_000, 40_000], n, [watch]);
    for (const t of [15_000, 18_000, 20_000, 24_000]) {
      const share = passedShare(10_000, t, 0.5, 30);
      const got = watch.arrivalsS.reduce((sum, arrival) => sum + Number(arrival <= t), 0) / n;
      // The top of the reach is a wall, 60 standard deviations of the drift behind: it does not show.
      expect(Math.abs(got - share), `at ${t} s`).toBeLessThan(FOUR * Math.sqrt((share * (1 - share)) / n));
    }
  });

  it('keep an even concentration even over a joint where the dispersion jumps a hundredfold', () => {
    const reaches = reachesOf([
      { ...even, id: 'a', lengthKm: 5, D: 50, into: 'b' },
      { ...even, id: 'b', lengthKm: 50, D: 0.5 },
    ]);
    const counts = new Array<number>(20).fill(0);
    const paths = 30_000;
    // Even over 6,000 s of travel with the joint at 10,000 s; after 1,000 s the middle 2,000 s round the joint are looked at.
    for (let i = 0; i < paths; i++) {
      const from = 6_000 + (6_000 * (i + 0.5)) / paths;
      const start = from < 10_000 ? { reach: 0, atS: from, eta: 0.5 } : { reach: 1, atS: from - 10_000, eta: 0.5 };
      const [place] = walk(reaches, start, [250, 500, 750, 1_000], 1, [], i);
      const bin = Math.floor(((place!.reach === 0 ? place!.atS : 10_000 + place!.atS) - 9_000) / 100);
      if (bin >= 0 && bin < 20) counts[bin]!++;
    }
    const wanted = (paths * 100) / 6_000;
    counts.forEach((count, i) => expect(Math.abs(count - wanted), `bin ${i}: ${count}`).toBeLessThan(FOUR * Math.sqrt(wanted)));
  });

  it('pass a chain of three reaches when its convolution says', () => {
    // Passage of independent reaches by Fourier inversion. Water that spreads back over a joint shifts times by D/U^2, up to 70 s: 0.013 of the share.
    const reaches = reachesOf([
      { ...even, id: 'a', lengthKm: 3, U: 0.4, D: 10, into: 'b' },
      { ...even, id: 'b', lengthKm: 5, U: 0.6, D: 25, into: 'c' },
      { ...even, id: 'c', lengthKm: 30, U: 0.5, D: 15 },
    ]);
    const place = { reach: 2, atS: 16_000, eta: 0 };
    const watch = new ChannelWatch(new ChannelKernel(place, reaches, 100, 0.3), reaches, 40, n, () => 1, new PathRandom(1, 1_000));
    walk(reaches, { reach: 0, atS: 0, eta: 0 }, Array.from({ length: 40 }, (_, i) => 1_000 * (i + 1)), n, [watch]);
    [[28_000, 0.0222240702628], [31_000, 0.348222305939], [32_000, 0.545606786718], [34_000, 0.859544122595]].forEach(([t, share]) => {
      const got = watch.arrivalsS.reduce((sum, arrival) => sum + Number(arrival <= t!), 0) / n;
      expect(Math.abs(got - share!), `at ${t} s`).toBeLessThan(0.013 + FOUR * Math.sqrt((share! * (1 - share!)) / n));
    });
  });

  it('hug the bank on which their tributary comes in, over its share of the discharge', () => {
    const reaches = reachesOf([
      { ...even, id: 'brook', lengthKm: 2, Q: 10, e: 1e-9, into: 'below', bank: 'right' },
      { ...even, id: 'stem', lengthKm: 20, Q: 30, into: 'below' },
      { ...even, id: 'below', lengthKm: 40, Q: 40, e: 1e-9 },
    ]);
    for (const place of walk(reaches, { reach: 0, atS: 0, eta: 0.5 }, [20_000], 200)) {
      expect(place.reach).toBe(2);
      // The brook takes the quarter at the right bank; its middle is at 7/8. Mixing of 1e-9 m2/s spreads by 1e-4 of the width.
      expect(place.eta).toBeCloseTo(0.875, 3);
    }
  });
});
