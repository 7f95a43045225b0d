import { contours } from 'd3-contour';
import { contourBands, contourRoom, ringsArea } from '../../../shared/contours';
import type { MakeCase, Prepared } from '../harness';
import { timeOurs } from '../harness';
import { LEVEL_SHARES, plumeFrame } from '../plume';

/** Largest difference of the enclosed area from the peer's, as a share. */
const AREA_TOLERANCE = 1e-4;

type Position = [number, number];
const shoelace = (ring: Position[]): number => ring.reduce((sum, [x, y], k) => sum + x * ring[(k + 1) % ring.length]![1] - y * ring[(k + 1) % ring.length]![0], 0) / 2;

async function prepare(n: number): Promise<Prepared> {
  const frame = plumeFrame(n, 24);
  const peak = frame.reduce((a, b) => Math.max(a, b), 0);
  const levels = LEVEL_SHARES.map((share) => share * peak);
  const room = contourRoom(n, n);
  const ours = () => contourBands(room, frame, levels);
  const make = contours().size([n, n]).thresholds(levels);
  const values = Array.from(frame);
  const theirs = make(values);
  const errors = ours().map((rings, k) => {
    const area = theirs[k]!.coordinates.flat().reduce((sum, ring) => sum + shoelace(ring as Position[]), 0);
    return Math.abs(Math.abs(ringsArea(rings)) / Math.abs(area) - 1);
  });
  return { peerName: 'd3-contour', error: Math.max(...errors), errorLimit: AREA_TOLERANCE, ours, peer: (repetitions) => timeOurs(() => make(values), repetitions) };
}

export const contourCases: Record<string, MakeCase> = { 'contour-256': () => prepare(256), 'contour-512': () => prepare(512) };
