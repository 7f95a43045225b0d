import { gzipSync } from 'node:zlib';
import { contours } from 'd3-contour';
import { contourBands, contourRoom, ringsArea, type Rings } from '../../../shared/contours';
import { decodeValue, encodeValues, type FrameScale } from '../../../shared/frames';
import { packRaster, packRings, unpackRaster, unpackRings } from '../../../shared/pack-frame';
import type { MakeCase, Prepared } from '../harness';
import { LEVEL_SHARES, plumeFrame } from '../plume';

const N = 256;
/** Every fourth of 48 frames. */
const FRAMES = Array.from({ length: 12 }, (_, k) => 4 * k + 3);
/** Cells of 30 m at latitude 47: degrees a cell. */
const [LON_STEP, LAT_STEP] = [0.000395, 0.00027];
const LEVEL = 6;

const zipped = (bytes: Uint8Array | string): number => gzipSync(bytes, { level: LEVEL }).length;

/** The polygons of one frame as GeoJSON with five decimals of a degree, about a metre. */
function geoJson(frame: Float64Array, levels: number[]): string {
  const place = ([x, y]: [number, number]): [number, number] => [Number((8.4 + x * LON_STEP).toFixed(5)), Number((47.3 + y * LAT_STEP).toFixed(5))];
  const features = contours().size([N, N]).thresholds(levels)(Array.from(frame)).map(({ value, coordinates }) => ({
    type: 'Feature',
    properties: { value },
    geometry: { type: 'MultiPolygon', coordinates: coordinates.map((polygon) => polygon.map((ring) => (ring as [number, number][]).map(place))) },
  }));
  return JSON.stringify({ type: 'FeatureCollection', features });
}

async function prepare(pack: (frame: Float64Array, levels: number[], scale: FrameScale) => { bytes: Uint8Array; error: number }, errorLimit: number): Promise<Prepared> {
  const frames = FRAMES.map((k) => plumeFrame(N, k));
  let [ours, theirs, error] = [0, 0, 0];
  for (const frame of frames) {
    const peak = frame.reduce((a, b) => Math.max(a, b), 0);
    const levels = LEVEL_SHARES.map((share) => share * peak);
    const packed = pack(frame, levels, { floor: levels[0]! / 100, top: peak });
    ours += zipped(packed.bytes);
    theirs += zipped(geoJson(frame, levels));
    error = Math.max(error, packed.error);
  }
  return { peerName: 'GeoJSON of d3-contour, 5 decimals, gzip 6', error, errorLimit, ours: () => undefined, peer: null, ratio: ours / theirs };
}

function perimeter({ points, ends }: Rings): number {
  let length = 0;
  let from = 0;
  for (const end of ends) {
    for (let k = from; k < end; k++) {
      const l = k + 1 < end ? k + 1 : from;
      length += Math.hypot(points[2 * l]! - points[2 * k]!, points[2 * l + 1]! - points[2 * k + 1]!);
    }
    from = end;
  }
  return length;
}

export const payloadCases: Record<string, MakeCase> = {
  // Error: how far the edges of a level have moved on the whole, in cells: difference of area by length. Each vertex may move by 0.15 and a thirty-second.
  'payload-contours-256': () =>
    prepare((frame, levels) => {
      const bands = contourBands(contourRoom(N, N), frame, levels);
      const bytes = packRings(bands);
      const error = Math.max(...unpackRings(bytes).map((rings, k) => Math.abs(ringsArea(rings) - ringsArea(bands[k]!)) / perimeter(bands[k]!)));
      return { bytes, error };
    }, 0.18),
  // Error: relative, of values above the floor; 253 steps over the range of the scale.
  'payload-raster-256': () =>
    prepare((frame, _levels, scale) => {
      const bytes = packRaster(encodeValues(frame, scale), N, N);
      const back = unpackRaster(bytes, N, N);
      let error = 0;
      for (let k = 0; k < frame.length; k++) if (frame[k]! > scale.floor) error = Math.max(error, Math.abs(decodeValue(back[k]!, scale) / frame[k]! - 1));
      return { bytes, error };
    }, 0.03),
};
