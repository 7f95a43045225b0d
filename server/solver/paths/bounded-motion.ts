import { LAND } from '../bounded/cell-grid';
import type { BoundedFlow } from '../bounded/flow-modes';
import type { FaceFlow } from '../bounded/projection';
import type { Spread } from '../open/spread';
import type { PathMotion } from './motion';

/** A cell is crossed in no fewer steps than this. */
const STEPS_A_CELL = 2;
/** A stretch of outline this many cells from a face through which water leaves is open. */
const OPEN_CELLS = 1.5;

/** Steps of a path over an estimate, at most: a fast current on fine cells is followed less closely. */
const MOST_STEPS = 1_500;

/** Spread about the current of a place: constant along and across it; null where the spread does not turn. */
export type TurningMixing = { readonly alongM2s: number; readonly acrossM2s: number };

/**
 * Motion in a current made consistent with mass on a grid: inside a cell the velocity runs straight between opposite
 * faces, so that the current has no divergence anywhere and none through land, and paths gather nowhere.
 * Drift by the midpoint rule. Source: Pollock 1988, Ground Water 26: 743 (velocity between cell faces).
 *
 * A tensor that turns with the current is taken half a step ahead; the drift of its own divergence, of the order of
 * (K_along - K_across) over the radius of a bend, is left out.
 */
export function boundedMotion(flow: BoundedFlow, fastestMps: number, spread: Spread, turning: TurningMixing | null, horizonS: number): PathMotion {
  const here = new Float64Array(2);
  const before = new Float64Array(3);
  const after = new Float64Array(3);
  const velocity = velocitySampler(flow);
  return {
    longestStepS: Math.max(horizonS / MOST_STEPS, Math.min(flow.slowS, flow.water.grid.dxM / (STEPS_A_CELL * Math.max(fastestMps, 1e-9)))),
    endsAtShore: false,
    leavesAt: openingsOf(flow),
    step(x, y, bornS, fromS, toS, out) {
      const h = toS - fromS;
      velocity(x, y, fromS, here);
      velocity(x + 0.5 * h * here[0]!, y + 0.5 * h * here[1]!, fromS + 0.5 * h, here);
      out[0] = h * here[0]!;
      out[1] = h * here[1]!;
      const speed2 = here[0]! * here[0]! + here[1]! * here[1]!;
      if (turning && speed2 > 1e-24) {
        const mean = (turning.alongM2s + turning.acrossM2s) * h;
        const half = ((turning.alongM2s - turning.acrossM2s) * h) / speed2;
        const cos = half * (here[0]! * here[0]! - here[1]! * here[1]!);
        out[2] = mean + cos;
        out[3] = 2 * half * here[0]! * here[1]!;
        out[4] = mean - cos;
        return;
      }
      spread.gained(bornS, fromS, before);
      spread.gained(bornS, toS, after);
      for (let k = 0; k < 3; k++) out[2 + k] = after[k]! - before[k]!;
    },
  };
}

type Velocity = (x: number, y: number, tS: number, out: Float64Array) => void;

function velocitySampler(flow: BoundedFlow): Velocity {
  const { water, modes } = flow;
  const { grid, thicknessM } = water;
  const { nx, ny, dxM, x0M, y0M, isWater } = grid;
  const factors = new Float64Array(3);
  const land: number = LAND;
  let factorsS = Number.NaN;
  const through = (field: keyof FaceFlow, face: number): number =>
    modes.steady[field][face]! +
    (modes.east ? factors[0]! * modes.east[field][face]! : 0) +
    (modes.north ? factors[1]! * modes.north[field][face]! : 0) +
    (modes.rise ? factors[2]! * modes.rise[field][face]! : 0);
  return (x, y, tS, out) => {
    out[0] = 0;
    out[1] = 0;
    const fx = (x - x0M) / dxM + 0.5;
    const fy = (y - y0M) / dxM + 0.5;
    const i = Math.floor(fx);
    const j = Math.floor(fy);
    if (i < 0 || j < 0 || i >= nx || j >= ny) return;
    const cell = j * nx + i;
    if (isWater[cell] === land) return;
    if (tS !== factorsS) {
      flow.factorsAt(tS, factors);
      factorsS = tS;
    }
    const per = 1 / (thicknessM[cell]! * dxM);
    const left = j * (nx + 1) + i;
    const [west, east] = [through('x', left), through('x', left + 1)];
    const [south, north] = [through('y', cell), through('y', cell + nx)];
    out[0] = (west + (fx - i) * (east - west)) * per;
    out[1] = (south + (fy - j) * (north - south)) * per;
  };
}

/** Where paths leave the water: near its open edge and near streams that run out. */
function openingsOf({ water }: BoundedFlow): (x: number, y: number) => boolean {
  const faces = [...water.openFaces, ...water.streams.flatMap((stream) => (stream.dischargeM3s < 0 ? stream.faces : []))];
  const reach2 = (OPEN_CELLS * water.grid.dxM) ** 2;
  return (x, y) => faces.some((face) => (face.xM - x) ** 2 + (face.yM - y) ** 2 < reach2);
}
