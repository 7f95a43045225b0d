import type { LonLat } from '../../../../shared/schemas/basics';

export type RowsRead<Row> = { rows: Row; problem: string | null };

const figure = (text: string): number => (/^[-+]?(\d+\.?\d*|\.\d+)$/.test(text) ? Number(text) : Number.NaN);
const cellsOf = (line: string): string[] => line.trim().replace(/;/g, ' ').split(/[,\s]+/).filter(Boolean);

/** What is wrong with a line, naming it by its number. */
function lineProblem(line: string, n: number, wanted: readonly string[]): string | null {
  const cells = cellsOf(line);
  const bad = cells.find((cell) => Number.isNaN(figure(cell)));
  if (bad !== undefined) return `Line ${n}: "${bad}" is not a number. Write ${wanted.join(', ')} with decimal points`;
  if (cells.length !== wanted.length) return `Line ${n} has ${cells.length} ${cells.length === 1 ? 'figure' : 'figures'}: write ${wanted.join(', ')}`;
  return null;
}

const rowOf = (line: string, count: number): number[] => Array.from({ length: count }, (_, i) => figure(cellsOf(line)[i] ?? ''));

const CENTRELINE = ['longitude', 'latitude', 'km'] as const;

export const writeCentreline = (line: readonly (readonly number[])[]): string => line.map((vertex) => vertex.join(', ')).join('\n');

/** Reads "lon, lat, km" lines. A line that cannot be read keeps its place with no figures, so that nothing passes for right. */
export function readCentreline(text: string): RowsRead<[number, number, number][]> {
  const lines = text.split('\n').map((line, i) => ({ line, n: i + 1 })).filter(({ line }) => line.trim() !== '');
  const problem = lines.map(({ line, n }) => lineProblem(line, n, CENTRELINE)).find((found) => found !== null) ?? null;
  return { rows: lines.map(({ line }) => rowOf(line, 3) as [number, number, number]), problem };
}

export const writeRings = (rings: readonly (readonly LonLat[])[]): string => rings.map((ring) => ring.map((position) => position.join(', ')).join('\n')).join('\n\n');

const AREA = ['longitude', 'latitude'] as const;

/** Reads rings of "lon, lat" lines with an empty line between them, or a GeoJSON polygon. A ring left open is closed. */
export function readRings(text: string): RowsRead<LonLat[][]> {
  if (text.trim().startsWith('{')) return readGeoJson(text);
  const rings: LonLat[][] = [];
  let problem: string | null = null;
  let isNew = true;
  text.split('\n').forEach((line, i) => {
    if (line.trim() === '') {
      isNew = true;
      return;
    }
    problem ??= lineProblem(line, i + 1, AREA);
    if (isNew) rings.push([]);
    isNew = false;
    rings.at(-1)!.push(rowOf(line, 2) as LonLat);
  });
  return { rows: rings.map(closed), problem };
}

function closed(ring: LonLat[]): LonLat[] {
  const [first, last] = [ring[0], ring.at(-1)];
  return first && last && ring.length > 2 && (first[0] !== last[0] || first[1] !== last[1]) ? [...ring, first] : ring;
}

type GeoJson = { type?: string; geometry?: GeoJson; features?: GeoJson[]; coordinates?: unknown };

function readGeoJson(text: string): RowsRead<LonLat[][]> {
  try {
    let shape = JSON.parse(text) as GeoJson;
    shape = shape.features?.[0] ?? shape;
    shape = shape.geometry ?? shape;
    if (shape.type !== 'Polygon' || !Array.isArray(shape.coordinates)) return { rows: [], problem: `This GeoJSON holds a ${shape.type ?? 'nameless shape'}: paste one Polygon` };
    return { rows: (shape.coordinates as number[][][]).map((ring) => closed(ring.map(([lon = Number.NaN, lat = Number.NaN]) => [lon, lat]))), problem: null };
  } catch {
    return { rows: [], problem: 'The GeoJSON cannot be read: paste it whole, or write one "longitude, latitude" a line' };
  }
}

/** "Q50, Q95, Q10": names between commas. */
export const readNames = (text: string): RowsRead<string[]> => ({ rows: text.split(/[,\n]/).map((name) => name.trim()).filter(Boolean), problem: null });
export const writeNames = (names: readonly string[]): string => names.join(', ');

/** "3; 9; 15": figures between semicolons or spaces; a comma inside a figure is a decimal comma. */
export function readFigures(text: string): RowsRead<number[]> {
  const cells = text.split(/[;\s]+/).filter(Boolean);
  const rows = cells.map((cell) => figure(cell.replace(',', '.')));
  const bad = cells.find((_, i) => Number.isNaN(rows[i]));
  return { rows, problem: bad === undefined ? null : `"${bad}" is not a number: write figures with a semicolon between them, such as 3; 9; 15` };
}
export const writeFigures = (figures: readonly number[]): string => figures.join('; ');
