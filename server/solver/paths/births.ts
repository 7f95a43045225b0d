import type { ReleaseProfile } from '../release-profile';

/** Births of `count` paths, one in the middle of every equal share of the release: less noise than births drawn at random. */
export function birthsOf(profile: ReleaseProfile, count: number): Float64Array {
  const births = new Float64Array(count).fill(profile.startS);
  if (profile.isInstant) return births;
  let low = profile.startS;
  for (let i = 0; i < count; i++) {
    const wanted = (i + 0.5) / count;
    let [a, b] = [low, profile.stopS];
    while (b - a > 1e-6 * (profile.stopS - profile.startS)) {
      const mid = (a + b) / 2;
      if (profile.released(mid) < wanted) a = mid;
      else b = mid;
    }
    births[i] = low = (a + b) / 2;
  }
  return births;
}
