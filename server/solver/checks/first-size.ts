import type { Release } from '../../../shared/schemas/estimate';
import { lengthText, sig } from '../format';
import type { ResolvedRelease } from '../release-profile';

/** A first cloud larger than this share of the later one is no point (common practice, no source). */
const POINT_SHARE = 0.3;

/**
 * Tells whether a first cloud still shows in the cloud that arrives: its standard deviation is half the stated radius, or
 * half that of the volume spilled over the depth, whichever is larger (a disk of radius R has R^2/4 along each axis).
 *
 * @param sigmaOf  standard deviation of the cloud of a release on arrival, m
 */
export function firstSizeText(releases: readonly ResolvedRelease[], depthM: number, sigmaOf: (release: Release) => number): { detail: string; remedy: string } | null {
  for (const { release } of releases) {
    const spilledM = release.spilledVolumeM3 === null ? 0 : Math.sqrt(release.spilledVolumeM3 / (Math.PI * depthM));
    const firstM = Math.max(release.initialRadiusM, spilledM) / 2;
    const laterM = sigmaOf(release);
    if (firstM < POINT_SHARE * laterM || firstM === 0) continue;
    const isLeftOut = spilledM > 1.01 * release.initialRadiusM;
    return {
      detail: `${release.name}: the first cloud has a standard deviation of ${lengthText(firstM)}, ${sig(firstM / laterM, 2)} of the ${lengthText(laterM)} on arrival; up to ${POINT_SHARE} it may be left out.${isLeftOut ? ' The volume spilled is larger than the stated first cloud.' : ''}`,
      remedy: isLeftOut ? `Set the radius of the first cloud to about ${lengthText(spilledM)}.` : 'Give its size with care: it decides the peak.',
    };
  }
  return null;
}
