import { gaussLegendre } from '../math/quadrature';
import type { RunInput } from '../types';
import type { LossPart } from './loss-parts';

export type LostBy = { process: string; amount: number }[];

const NODES = 8;

/**
 * What each process took of the lost part by time t: integral of its rate over the surviving amount,
 *   L_i = sum over parcels of integral k_i(t) exp(-K(t) + K(s)) dt.
 * Rates are constant between switches, where the integral is exact: the share k_i/k of what was lost there. The shares
 * are laid on the lost amount of the books, so that they add up to it whichever solver kept them.
 */
export function lostBy({ loss, releases, weights }: RunInput, parts: readonly LossPart[], tS: number, lost: number): LostBy {
  const sums = parts.map(() => 0);
  for (const { profile, index } of releases) {
    if (tS <= profile.startS) continue;
    const add = (bornS: number, share: number): void => addParcel(sums, parts, loss, bornS, tS, share * weights.likely[index]!);
    if (profile.isInstant) add(profile.startS, 1);
    else forEachBirth([...profile.knotsS, ...loss.switches(profile.startS, profile.stopS)], Math.min(tS, profile.stopS), (bornS, width) => add(bornS, width * profile.rate(bornS)));
  }
  const total = sums.reduce((sum, part) => sum + part, 0);
  return parts.map((part, i) => ({ process: part.name, amount: total > 0 ? (lost * sums[i]!) / total : 0 }));
}

function forEachBirth(knotsS: readonly number[], toS: number, use: (bornS: number, width: number) => void): void {
  const cuts = [...new Set(knotsS.filter((t) => t < toS))].sort((a, b) => a - b).concat(toS);
  const { x, w } = gaussLegendre(NODES);
  for (let i = 1; i < cuts.length; i++) {
    const half = (cuts[i]! - cuts[i - 1]!) / 2;
    x.forEach((node, k) => use(cuts[i - 1]! + half * (1 + node), half * w[k]!));
  }
}

function addParcel(sums: number[], parts: readonly LossPart[], loss: RunInput['loss'], bornS: number, tS: number, amount: number): void {
  const cuts = [bornS, ...loss.switches(bornS, tS), tS];
  const atBirth = loss.exposure(bornS);
  for (let i = 1; i < cuts.length; i++) {
    const [from, to] = [cuts[i - 1]!, cuts[i]!];
    const exposure = loss.exposure(to) - loss.exposure(from);
    if (exposure <= 0) continue;
    const gone = amount * Math.exp(atBirth - loss.exposure(from)) * -Math.expm1(-exposure);
    parts.forEach((part, k) => (sums[k]! += (gone * (part.clock.exposure(to) - part.clock.exposure(from))) / exposure));
  }
}
