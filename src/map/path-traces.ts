import { snapToReaches } from '../../shared/geo';
import type { EstimateWater } from '../../shared/schemas/estimate';
import type { Paths } from '../../shared/schemas/estimate-result';
import { alongCourse, courseOf, coursePoint, reachWidthM, ribbonPx, type Course } from './channel-course';
import { toWorld, type MapView } from './mercator';

/** A path made ready to draw: vertices in order, with the number of vertices reached at each of its own times. */
export type PathTrace = {
  /** Times of the run at which the path is known, as positions in `timesS`: the last of them. */
  readonly firstTime: number;
  /** Vertices up to and with each of these times. */
  readonly upTo: readonly number[];
  readonly at: (vertex: number, view: MapView, out: Pixel) => void;
};
export type Pixel = { x: number; y: number };

/** Lines of an open water go straight from place to place; those of a river follow its course within the ribbon as it is drawn. */
export function pathTraces(paths: Pick<Paths, 'timesS' | 'lines'>, water: EstimateWater): PathTrace[] {
  const make = water.kind === 'river' ? riverTracer(water) : openTrace;
  return paths.lines.flatMap((line) => (line.length > 1 ? [{ firstTime: paths.timesS.length - line.length, ...make(line) }] : []));
}

type Line = Paths['lines'][number];
type Made = Omit<PathTrace, 'firstTime'>;

function openTrace(line: Line): Made {
  const world = line.map((position) => toWorld(position));
  return {
    upTo: world.map((_, i) => i + 1),
    at(vertex, view, out) {
      const [x, y] = world[vertex]!;
      out.x = x * view.scale - view.offsetX;
      out.y = y * view.scale - view.offsetY;
    },
  };
}

/** A vertex on a river: course, chainage, and the share of the width to the left of the middle (-0.5 to 0.5). */
type Vertex = { course: Course; widthM: number; km: number; left: number };

function riverTracer(water: Extract<EstimateWater, { kind: 'river' }>): (line: Line) => Made {
  const courses = new Map(water.reaches.map((reach) => [reach.id, { reach, course: courseOf(reach), widthM: reachWidthM(reach, water) }] as const));
  const point = coursePoint();
  const vertexAt = (position: Line[number]): { reachId: string; vertex: Vertex } | null => {
    const snap = snapToReaches(position, water.reaches);
    if (!snap) return null;
    const { course, widthM } = courses.get(snap.reachId)!;
    const share = Math.min(0.5, snap.distanceM / widthM);
    return { reachId: snap.reachId, vertex: { course, widthM, km: snap.chainageKm, left: snap.bank === 'left' ? share : -share } };
  };
  return (line) => {
    const vertices: Vertex[] = [];
    const upTo: number[] = [];
    let before: { reachId: string; vertex: Vertex } | null = null;
    for (const position of line) {
      const now = vertexAt(position);
      if (now && before) vertices.push(...between(courses, before, now));
      if (now) vertices.push(now.vertex);
      upTo.push(vertices.length);
      before = now ?? before;
    }
    return {
      upTo,
      at(index, view, out) {
        const { course, widthM, km, left } = vertices[index]!;
        alongCourse(course, km, point);
        const offset = left * ribbonPx(widthM, view.metresPerPixel, view.zoom);
        out.x = point.x * view.scale - view.offsetX + point.leftX * offset;
        out.y = point.y * view.scale - view.offsetY + point.leftY * offset;
      },
    };
  };
}

type Courses = ReadonlyMap<string, { reach: { downstreamReachId: string | null }; course: Course; widthM: number }>;

/** The bends between two places, reach by reach downstream; nothing where the second does not lie below the first. */
function between(courses: Courses, from: { reachId: string; vertex: Vertex }, to: { reachId: string; vertex: Vertex }): Vertex[] {
  const out: Vertex[] = [];
  let km = from.vertex.km;
  for (let id: string | null = from.reachId; id !== null; ) {
    const { reach, course, widthM }: { reach: { downstreamReachId: string | null }; course: Course; widthM: number } = courses.get(id)!;
    const end = id === to.reachId ? to.vertex.km : -Infinity;
    for (const vertexKm of course.chainageKm) if (vertexKm < km && vertexKm > end) out.push({ course, widthM, km: vertexKm, left: to.vertex.left });
    if (id === to.reachId) return out;
    id = reach.downstreamReachId;
    km = Infinity;
  }
  return [];
}
