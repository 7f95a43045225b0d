export type MapTheme = 'day' | 'night';

/** Concentration: one hue in even steps of lightness, light to dark. The same figures stand as tokens in styles/tokens.css. */
export const madder = ['#fadfed', '#f2b1d1', '#df83b0', '#c1558a', '#992f65', '#691941', '#3d0c23'] as const;
/** Chance of exceeding: another single hue, so that the two kinds of map are never taken for each other. */
export const ochre = ['#f4e8c3', '#e0c482', '#c89d48', '#a57627', '#7e541b', '#543514'] as const;

/** Colours of what is drawn over the base map. */
export const mapInk: Record<MapTheme, { ink: string; ink2: string; paper: string; kingfisher: string; river: string; hatch: string }> = {
  day: { ink: '#1c2832', ink2: '#49545e', paper: '#f9f6f2', kingfisher: '#006e8c', river: '#a5c4cc', hatch: '#49545e' },
  night: { ink: '#ebe7e0', ink2: '#b8b4ac', paper: '#0f171e', kingfisher: '#5bc1d9', river: '#2a4a57', hatch: '#b8b4ac' },
};

/** Bands lie over the map at this opacity, so that the water below stays readable. */
export const BAND_OPACITY = 0.7;

const channels = (hex: string): [number, number, number] => [1, 3, 5].map((at) => Number.parseInt(hex.slice(at, at + 2), 16)) as [number, number, number];

function between(ramp: readonly string[], share: number): string {
  const at = share * (ramp.length - 1);
  const low = Math.min(ramp.length - 2, Math.floor(at));
  const a = channels(ramp[low]!);
  const b = channels(ramp[low + 1]!);
  const mixed = a.map((value, k) => Math.round(value + (b[k]! - value) * (at - low)));
  return `#${mixed.map((value) => value.toString(16).padStart(2, '0')).join('')}`;
}

/** Colours of `count` bands from the lowest level up; by night the steps run from dark to light. */
export function bandColours(count: number, theme: MapTheme, ramp: readonly string[] = madder): string[] {
  const steps = theme === 'day' ? ramp : [...ramp].reverse();
  return Array.from({ length: count }, (_, k) => between(steps, count === 1 ? 0.5 : k / (count - 1)));
}
