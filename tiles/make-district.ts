/**
 * Lays the Orlavane District's landscape and writes it as GeoJSON into tiles/district/, and its centrelines and
 * outlines for the registers into server/db/seed/district/shapes.json. Seeded: the same files every time.
 *
 *   node --import tsx tiles/make-district.ts
 */
import { mkdirSync, writeFileSync } from 'node:fs';
import type { Feature, Geometry } from 'geojson';
import * as d from './district-points';
import { areas, grid, lightOn, makeGround, woodField } from './build/relief';
import { names } from './build/names';
import { buildTown } from './build/towns';
import * as w from './build/waters';
import { cutCorners, isInside, joinSpans, meanderSpans, ringAreaM2, smoothLine, smoothSpans, thin, thinRing, toLonLat, toXy, type Xy } from './geometry/curves';
import { cellMiddle } from './geometry/grid';
import { noise2, seededRandom } from './geometry/noise';

const round = (value: number, digits: number) => Number(value.toFixed(digits));
const position = (xy: Xy, digits = 5) => toLonLat(xy).map((v) => round(v, digits));
const closed = (ring: number[][]) => [...ring, ring[0]!];
const line = (xy: readonly Xy[], digits = 5): Geometry => ({ type: 'LineString', coordinates: xy.map((p) => position(p, digits)) });
const polygon = (xy: readonly Xy[], digits = 5): Geometry => ({ type: 'Polygon', coordinates: [closed(xy.map((p) => position(p, digits)))] });
const feature = (kind: string, geometry: Geometry, properties: Record<string, unknown> = {}): Feature => ({ type: 'Feature', properties: { kind, ...properties }, geometry });

/** A field's areas above a level as one MultiPolygon, thinned; specks below `leastM2` are left out. */
function areaFeature(kind: string, field: ArrayLike<number>, level: number, toleranceM: number, leastM2: number): Feature {
  const polygons = areas(field, level)
    .map((rings) => rings.filter((ring, i) => i === 0 || ringAreaM2(ring.map(toXy)) > leastM2).map((ring) => closed(thinRing(cutCorners(cutCorners(ring.slice(0, -1).map(toXy))), toleranceM).map((p) => position(p, 4)))))
    .filter((rings) => ringAreaM2(rings[0]!.map(toXy)) > leastM2);
  return feature(kind, { type: 'MultiPolygon', coordinates: polygons }, { level });
}

const outFolder = new URL('./district/', import.meta.url);
mkdirSync(outFolder, { recursive: true });
function write(name: string, features: Feature[]): void {
  writeFileSync(new URL(`${name}.geojson`, outFolder), `{"type":"FeatureCollection","features":[\n${features.map((f) => JSON.stringify(f)).join(',\n')}\n]}\n`);
}

/* ---------- waters ---------- */
const coast = w.islandCoast();
const ollemar = w.ollemarCurve();
const quillock = w.quillockCurve();
const evarrow = w.evarrowCurve();
const estuary = w.estuaryRings(ollemar);
const harbour = w.harbourRings();
const lake = w.lakeRing();
const marsh = w.marshOutline();
const riverLines = [ollemar, quillock, evarrow].map((curve) => curve.map(([x, y]): Xy => [x, y]));
const streams = w.streamLines(riverLines);

// A strip over the line that closes the island at the mouth, so that river and sea meet without a shore.
const [mole, spit] = [toXy(d.coastNorthOfRiver[d.coastNorthOfRiver.length - 1]!.to), toXy(d.ferrowSpit)];
const mouth: Xy[] = [[mole[0] + 60, mole[1] - 12], [mole[0] - 90, mole[1] - 45], [spit[0] - 70, spit[1] + 40], [spit[0] + 60, spit[1] + 12]];

const kept = (points: readonly d.ChainagePoint[]) => points.map(([, , km]) => km);
const reaches = {
  r1: w.thinReach(ollemar, 54, 33.5, kept(d.ollemar)),
  r2: w.thinReach(ollemar, 33.5, 28.7, kept(d.ollemar)),
  r3: w.thinReach(ollemar, 28.7, 14, kept(d.ollemar)),
  estuary: w.thinReach(ollemar, 14, 0, kept(d.ollemar), 120),
  evarrow: w.thinReach(evarrow, 10.5, 0, kept(d.evarrow)),
  quillock: w.thinReach(quillock, 11.1, 0, kept(d.quillock)),
};
const drawn = (reach: readonly w.RiverVertex[]) => thin(smoothLine(reach.map(([x, y]): Xy => [x, y]), 15), 0.8);
write('waters', [
  feature('river', line(drawn(reaches.r1)), { name: 'River Ollemar', widthM: 24, rank: 1 }),
  feature('river', line(drawn(reaches.r2)), { name: 'River Ollemar', widthM: 32, rank: 1 }),
  feature('river', line(drawn(reaches.r3)), { name: 'River Ollemar', widthM: 37, rank: 1 }),
  feature('river', line(drawn(reaches.evarrow)), { name: 'Evarrow Water', widthM: 14, rank: 2 }),
  feature('river', line(drawn(reaches.quillock)), { name: 'Quillock Brook', widthM: 7.5, rank: 2 }),
  ...streams.map((stream) => feature('stream', line(thin(stream.line, 4)), { name: stream.name, widthM: stream.name === 'Upper Ollemar' ? 16 : 4 })),
  feature('estuary', polygon(thinRing(estuary.water, 3)), { name: 'Ollemar estuary' }),
  ...estuary.banks.map((bank) => feature('bank', line(thin(bank, 3)))),
  feature('mouth', polygon(mouth)),
  feature('channel', polygon(thinRing(estuary.channel, 6))),
  feature('lake', polygon(thinRing(lake, 2)), { name: 'Lake Thessaby' }),
  feature('harbour', polygon(harbour.basin), { name: 'Kestovar harbour' }),
  feature('harbour', polygon(harbour.gap)),
  feature('marsh', polygon(thinRing(marsh, 3)), { name: 'Ferrowmere Marsh' }),
  feature('stream', line(smoothLine(([[-117.2182, -44.5003], [-117.2195, -44.504], [-117.2235, -44.5095], [-117.2215, -44.5155], [-117.2255, -44.5205]] as d.Point[]).map(toXy), 30)), { name: '', widthM: 9 }),
]);

/* ---------- ground ---------- */
const dry = (ring: readonly Xy[]) => thinRing(ring, 8);
const [coastThin, estuaryThin, lakeThin] = [dry(coast.ring), dry(estuary.water), dry(lake)];
const ground = makeGround(coastThin, [estuaryThin, lakeThin], riverLines, streams.map((s) => s.line));
// Lakes are no sea: depth bands follow the salt water alone.
const seaDepth = Float64Array.from(ground.depthM, (depth, i) => (isInside(cellMiddle(grid, i), lakeThin) ? 0 : depth));
const flats: Xy[] = smoothLine(([[-117.3045, -44.5045], [-117.3105, -44.5075], [-117.318, -44.51], [-117.3225, -44.5165], [-117.322, -44.5245], [-117.319, -44.533], [-117.308, -44.53], [-117.303, -44.516], [-117.3015, -44.5045], [-117.3045, -44.5045]] as d.Point[]).map(toXy), 40);
write('land', [
  feature('land', polygon(thinRing(coast.ring, 3))),
  areaFeature('within-depth', Float64Array.from(seaDepth, (depth) => -depth), -21.5, 25, 4e6),
  areaFeature('within-depth', Float64Array.from(seaDepth, (depth) => -depth), -5, 15, 4e5),
  feature('flats', polygon(thin(flats, 4).slice(0, -1)), { name: 'Cockle Flats' }),
]);
write('relief', [
  ...[60, 120, 180, 240, 300, 360, 420].map((level) => areaFeature('height', ground.heightM, level, 12, 2.5e5)),
  areaFeature('shade', Float64Array.from(lightOn(ground), (light) => -light), 0.28, 15, 2e5),
  areaFeature('shade', Float64Array.from(lightOn(ground), (light) => -light), 0.62, 15, 2e5),
  areaFeature('lit', lightOn(ground), 0.3, 15, 2e5),
]);
write('woods', [areaFeature('wood', woodField(ground), 0, 12, 6e4)]);

/* ---------- towns and ways ---------- */
const nearRiver = (at: Xy) => riverLines.some((river) => river.some(([x, y]) => Math.abs(x - at[0]) < 60 && Math.abs(y - at[1]) < 60));
const isDry = (at: Xy) =>
  isInside(at, coastThin) && !isInside(at, estuaryThin) && !isInside(at, lakeThin) && !isInside(at, harbour.gap) && !isInside(at, marsh) && !nearRiver(at) &&
  !(Math.abs(at[0] - toXy(d.harbour.centre)[0]) < 540 && Math.abs(at[1] - toXy(d.harbour.centre)[1]) < 320);
const villages = names.filter((n) => n.kind === 'village').map((n): d.Town => ({ name: n.text, at: n.at, people: 420, gridDeg: 17 }));
const built = [...d.towns, ...villages].map((town, i) => ({ town, shapes: buildTown(town, 70 + i, isDry) }));
write('towns', [
  ...built.map(({ town, shapes }) => feature('town', polygon(thinRing(shapes.outline, 6)), { name: town.name, people: town.people })),
  ...built.map(({ town, shapes }) => feature('blocks', { type: 'MultiPolygon', coordinates: shapes.blocks.map((b) => [closed(b.map((p) => position(p)))]) }, { name: town.name })),
]);
const way = (through: readonly d.Point[], seed: number) => thin(joinSpans(meanderSpans(smoothSpans(through.map(toXy), 30), { amplitudeM: 28, wavelengthM: 1_700, seed })), 2.5);
/** A short line across a reach at a chainage. */
const across = (reach: readonly w.RiverVertex[], km: number, halfM: number): Xy[] => {
  const i = reach.findIndex((vertex) => vertex[2] <= km);
  const [a, b] = [reach[i - 1]!, reach[i]!];
  const t = (a[2] - km) / (a[2] - b[2]);
  const [x, y, dx, dy] = [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1]), b[0] - a[0], b[1] - a[1]];
  const length = Math.hypot(dx, dy);
  return [[x - (dy / length) * halfM, y + (dx / length) * halfM], [x + (dy / length) * halfM, y - (dx / length) * halfM]];
};
const street = (a: d.Point, b: d.Point) => line([toXy(a), toXy(b)]);
write('ways', [
  ...d.roads.map((road, i) => feature('road', line(road.rank === 3 ? way(road.through, 90 + i) : thin(smoothLine(road.through.map(toXy), 30), 2)), { ref: road.ref, rank: road.rank })),
  feature('rail', line(thin(smoothLine(d.rail.map(toXy), 30), 2))),
  feature('wall', street([-117.305, -44.492], [-117.3118, -44.4946])),
  feature('wall', street([-116.8826, -44.5541], [-116.8776, -44.552])),
  feature('weir', line(across(reaches.r3, 14.02, 34))),
  feature('wall', line(across(reaches.r1, 35.5, 32))),
  feature('jetty', street([-116.8113, -44.6101], [-116.812, -44.608])),
]);

/* ---------- fields and tufts ---------- */
const random = seededRandom(7);
const hedges: Xy[][] = [];
const STEP = 270;
for (let u = -110; u < 110; u++)
  for (let v = -70; v < 70; v++) {
    const node = (i: number, j: number): Xy => [i * STEP + 150 * (noise2(i * 0.7, j * 0.7, 81) - 0.5) + 900 * noise2(i / 17, j / 17, 83), j * STEP + 150 * (noise2(i * 0.7, j * 0.7, 82) - 0.5) + 900 * noise2(i / 17, j / 17, 84)];
    const here = node(u, v);
    const cell = Math.round((here[1] - grid.y0) / grid.cellM) * grid.nx + Math.round((here[0] - grid.x0) / grid.cellM);
    if (!ground.isLand[cell] || ground.heightM[cell]! > 75 || ground.toShoreM[cell]! < 350) continue;
    for (const next of [node(u + 1, v), node(u, v + 1)])
      if (random() > 0.36 && isDry(here) && isDry(next) && !built.some(({ shapes }) => isInside(here, shapes.outline))) hedges.push([here, next]);
  }
const tufts: number[][] = [];
const [mx, my] = toXy([-117.224, -44.5135]);
for (let x = -2_200; x < 2_200; x += 105)
  for (let y = -1_500; y < 1_500; y += 95) {
    const at: Xy = [mx + x + 80 * (random() - 0.5), my + y + 70 * (random() - 0.5)];
    if (isInside(at, marsh)) tufts.push(position(at));
  }
write('fields', [
  feature('hedges', { type: 'MultiLineString', coordinates: hedges.map((h) => h.map((p) => position(p, 4))) }),
  feature('tufts', { type: 'MultiPoint', coordinates: tufts }),
]);

/* ---------- names and soundings ---------- */
const soundings: Feature[] = [];
for (let i = -28; i < -8; i++)
  for (let j = -15; j < 15; j++) {
    const at: Xy = [i * 1_800 + 1_100 * (noise2(i * 3.3, j * 3.3, 91) - 0.5) + 900 * (j & 1), j * 1_600 + 1_000 * (noise2(i * 3.3, j * 3.3, 92) - 0.5)];
    const cell = Math.round((at[1] - grid.y0) / grid.cellM) * grid.nx + Math.round((at[0] - grid.x0) / grid.cellM);
    const depth = seaDepth[cell] ?? 0;
    if (at[0] > grid.x0 && at[0] < -15_000 && depth > 1.5 && depth < 60) soundings.push(feature('sounding', { type: 'Point', coordinates: position(at, 4) }, { text: depth < 10 ? depth.toFixed(1) : depth.toFixed(0) }));
  }
const roadPlates = d.roads.filter((road) => road.ref).flatMap((road) => {
  const along = smoothLine(road.through.map(toXy), 200);
  return along.filter((_, k) => k % 45 === 22).map((at) => feature('name', { type: 'Point', coordinates: position(at) }, { text: road.ref, style: 'road', rank: 5, minZoom: 10 }));
});
write('names', [
  ...roadPlates,
  feature('name', { type: 'Point', coordinates: position(across(reaches.r1, 35.5, 32)[0]!) }, { text: 'Meadows footbridge', style: 'structure', rank: 4, minZoom: 13, side: 'right' }),
  ...names.map(({ at, ...properties }) => feature('name', { type: 'Point', coordinates: at }, { ...properties, kind: 'name', style: properties.kind })),
  ...soundings,
]);

/* ---------- outlines for the registers ---------- */
const vertices = (reach: readonly w.RiverVertex[]) => reach.map(([x, y, km]) => [...position([x, y]), round(km, 4)]);
const box: d.Point[] = [[-117.4, -44.72], [-117.6, -44.72], [-117.6, -44.28], [-117.36, -44.28]];
const westCoast = [...thin(coast.northShore, 15), ...thin(coast.southShore, 15)];
const shapes = {
  about: 'Invented. Made by tiles/make-district.ts: do not edit by hand.',
  centrelines: Object.fromEntries(Object.entries(reaches).map(([id, reach]) => [id, vertices(reach)])),
  areas: {
    coast: [closed([...westCoast.map((p) => position(p)), ...box])],
    estuary: [closed(thinRing(estuary.water, 12).map((p) => position(p)))],
    lake: [closed(thinRing(lake, 6).map((p) => position(p)))],
    harbour: [closed(harbour.basin.map((p) => position(p)))],
  },
};
const seedFolder = new URL('../server/db/seed/district/', import.meta.url);
mkdirSync(seedFolder, { recursive: true });
writeFileSync(new URL('shapes.json', seedFolder), `${JSON.stringify(shapes).replaceAll(']],', ']],\n')}\n`);

const lengthOf = (reach: readonly w.RiverVertex[]) => reach.slice(1).reduce((sum, [x, y], i) => sum + Math.hypot(x - reach[i]![0], y - reach[i]![1]), 0) / 1_000;
for (const [id, reach] of Object.entries(reaches))
  console.log(`${id}: ${reach.length} vertices, drawn ${lengthOf(reach).toFixed(2)} km for ${(reach[0]![2] - reach[reach.length - 1]![2]).toFixed(2)} km of chainage`);
console.log(`lake ${(ringAreaM2(lake) / 1e6).toFixed(2)} km2; coast ${coast.ring.length} vertices; ${built.reduce((n, b) => n + b.shapes.blocks.length, 0)} blocks, ${hedges.length} hedges, ${soundings.length} soundings`);
