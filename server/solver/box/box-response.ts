import type { LossClock } from '../loss';
import type { ReleaseProfile } from '../release-profile';

/** One kilogram of one release in a stirred basin at one time: what is there, and what has gone which way. */
export type BoxBooks = { released: number; inWater: number; lost: number; left: number };

/**
 * A stirred basin that renews itself at a constant rate: dM/dt = m'(t) - (f + k(t)) M, f the flushing and k the loss.
 * Between the knots of the release and the switches of the loss the rate of release is linear and k constant, so that
 * M(t) = M0 e^(-r h) + a phi1 + b phi2 holds exactly, r = f + k, m' = a + b s over a stretch of length h:
 * phi1 = (1 - e^(-r h))/r, phi2 = (h - phi1)/r. What went is shared between flushing and loss as f to k.
 * Source: a completely mixed reactor, Fischer et al. 1979, section 7.2; Thomann & Mueller 1987, section 3.1.
 */
export class BoxRelease {
  private readonly knots: number[];
  private readonly states: BoxBooks[];

  constructor(private readonly profile: ReleaseProfile, private readonly flushingPerS: number, private readonly loss: LossClock | null, horizonS: number) {
    const switches = loss ? loss.switches(profile.startS, horizonS) : [];
    this.knots = [...new Set([...profile.knotsS, ...switches])].filter((tS) => tS >= profile.startS && tS <= horizonS).sort((a, b) => a - b);
    let state: BoxBooks = { released: 0, inWater: 0, lost: 0, left: 0 };
    if (profile.isInstant) state = { released: 1, inWater: 1, lost: 0, left: 0 };
    this.states = [state];
    for (let n = 1; n < this.knots.length; n++) {
      state = this.onward(state, this.knots[n - 1]!, this.knots[n]!);
      this.states.push(state);
    }
  }

  at(tS: number): BoxBooks {
    if (tS <= this.profile.startS) return { released: 0, inWater: 0, lost: 0, left: 0 };
    const n = this.knots.findLastIndex((knotS) => knotS <= tS);
    return this.onward(this.states[n]!, this.knots[n]!, tS);
  }

  private onward(before: BoxBooks, fromS: number, toS: number): BoxBooks {
    const h = toS - fromS;
    if (h <= 0) return before;
    const { profile } = this;
    const k = this.loss ? (this.loss.exposure(toS) - this.loss.exposure(fromS)) / h : 0;
    const rate = this.flushingPerS + k;
    const added = profile.released(toS) - (profile.isInstant ? 1 : profile.released(fromS));
    // The mean of a linear rate and its slope, from just inside the stretch: a rate may jump at a knot.
    const slope = profile.isInstant ? 0 : (profile.rate(fromS + 0.75 * h) - profile.rate(fromS + 0.25 * h)) / (0.5 * h);
    const start = added / h - (slope * h) / 2;
    const phi1 = h * expShare(rate * h);
    const phi2 = h * h * expShare2(rate * h);
    const inWater = before.inWater * Math.exp(-rate * h) + start * phi1 + slope * phi2;
    const gone = before.inWater + added - inWater;
    const lost = rate > 0 ? (gone * k) / rate : 0;
    return { released: before.released + added, inWater, lost: before.lost + lost, left: before.left + gone - lost };
  }
}

/** (1 - e^-x)/x, 1 at 0. */
const expShare = (x: number): number => (x === 0 ? 1 : -Math.expm1(-x) / x);

/** (1 - expShare(x))/x = (x - 1 + e^-x)/x^2, 1/2 at 0; a series where that cancels. */
const expShare2 = (x: number): number => (x < 0.02 ? 1 / 2 - x / 6 + (x * x) / 24 - x ** 3 / 120 + x ** 4 / 720 : (1 - expShare(x)) / x);
