const DAY_MS = 86_400_000;
const RAD = Math.PI / 180;
/** Sun's upper limb at the horizon, with refraction, degrees. */
const SUNSET_ALTITUDE_DEG = -0.833;

/**
 * Altitude of the sun, degrees. Low-precision solar coordinates, good to about 0.01 degree until 2050.
 * Source: U.S. Naval Observatory and H.M. Nautical Almanac Office, The Astronomical Almanac, section C, "Low precision formulas for the Sun".
 */
export function sunAltitudeDeg(atMs: number, lon: number, lat: number): number {
  const n = atMs / DAY_MS + 2_440_587.5 - 2_451_545.0;
  const meanLon = 280.46 + 0.9856474 * n;
  const anomaly = (357.528 + 0.9856003 * n) * RAD;
  const eclipticLon = (meanLon + 1.915 * Math.sin(anomaly) + 0.02 * Math.sin(2 * anomaly)) * RAD;
  const obliquity = (23.439 - 0.0000004 * n) * RAD;
  const declination = Math.asin(Math.sin(obliquity) * Math.sin(eclipticLon));
  const rightAscension = Math.atan2(Math.cos(obliquity) * Math.sin(eclipticLon), Math.cos(eclipticLon));
  const siderealDeg = 280.46061837 + 360.98564736629 * n + lon;
  const hourAngle = siderealDeg * RAD - rightAscension;
  return Math.asin(Math.sin(lat * RAD) * Math.sin(declination) + Math.cos(lat * RAD) * Math.cos(declination) * Math.cos(hourAngle)) / RAD;
}

/** Spans of night between two instants, as elapsed seconds after `startMs`; edges found to the minute. */
export function nightSpans(startMs: number, lengthS: number, lon: number, lat: number): { fromS: number; toS: number }[] {
  const isNight = (s: number) => sunAltitudeDeg(startMs + s * 1_000, lon, lat) < SUNSET_ALTITUDE_DEG;
  const spans: { fromS: number; toS: number }[] = [];
  const stepS = Math.max(600, Math.ceil(lengthS / 1_000));
  let from: number | null = isNight(0) ? 0 : null;
  for (let s = stepS; s - stepS < lengthS; s += stepS) {
    const at = Math.min(s, lengthS);
    if (isNight(at) === (from !== null)) continue;
    const edge = edgeBetween(isNight, at - stepS, at);
    if (from === null) from = edge;
    else {
      spans.push({ fromS: from, toS: edge });
      from = null;
    }
  }
  if (from !== null) spans.push({ fromS: from, toS: lengthS });
  return spans;
}

function edgeBetween(isNight: (s: number) => boolean, a: number, b: number): number {
  const atA = isNight(a);
  let low = a;
  let high = b;
  while (high - low > 60) {
    const mid = (low + high) / 2;
    if (isNight(mid) === atA) low = mid;
    else high = mid;
  }
  return (low + high) / 2;
}
