import proj4 from 'proj4';
import { formatPosition } from '../../shared/format';
import type { LonLat } from '../../shared/schemas/basics';

export const coordinateStyles = ['decimal', 'minutes', 'utm'] as const;
export type CoordinateStyle = (typeof coordinateStyles)[number];
export const coordinateStyleName: Record<CoordinateStyle, string> = { decimal: 'decimal degrees', minutes: 'degrees and minutes', utm: 'UTM' };

/** A position as people write it, latitude first: "44.44900° S, 116.80160° W", "44° 26.940′ S, 116° 48.096′ W", "11 S 516726 5078031". */
export const formatCoordinates = (position: LonLat, style: CoordinateStyle): string => (style === 'utm' ? formatUtm(position) : formatPosition(position, style));

/* ---------- UTM ---------- */

/** Zone of a position, with the widened zones of southern Norway and Svalbard. */
export function utmZone([lon, lat]: LonLat): number {
  if (lat >= 56 && lat < 64 && lon >= 3 && lon < 12) return 32;
  if (lat >= 72 && lat < 84 && lon >= 0 && lon < 42) return lon < 9 ? 31 : lon < 21 ? 33 : lon < 33 ? 35 : 37;
  return Math.min(60, Math.floor((lon + 180) / 6) + 1);
}

export type Utm = { zone: number; hemisphere: 'N' | 'S'; eastingM: number; northingM: number };

const utmDefinition = (zone: number, hemisphere: 'N' | 'S'): string => `+proj=utm +zone=${zone}${hemisphere === 'S' ? ' +south' : ''} +datum=WGS84 +units=m +no_defs`;

/** WGS 84 position in UTM metres. */
export function toUtm(position: LonLat): Utm {
  const zone = utmZone(position);
  const hemisphere = position[1] < 0 ? 'S' : 'N';
  const [eastingM, northingM] = proj4('WGS84', utmDefinition(zone, hemisphere), [...position]) as [number, number];
  return { zone, hemisphere, eastingM, northingM };
}

export const fromUtm = ({ zone, hemisphere, eastingM, northingM }: Utm): LonLat => proj4(utmDefinition(zone, hemisphere), 'WGS84', [eastingM, northingM]) as LonLat;

function formatUtm(position: LonLat): string {
  const utm = toUtm(position);
  return `${utm.zone} ${utm.hemisphere} ${utm.eastingM.toFixed(0)} ${utm.northingM.toFixed(0)}`;
}

/* ---------- reading ---------- */

export type ParsedPosition = { ok: true; position: LonLat; style: CoordinateStyle } | { ok: false; message: string };
const refuse = (message: string): ParsedPosition => ({ ok: false, message });

const EXAMPLES = "Write latitude then longitude, for example -44.449, -116.802 or 44 26.94 S, 116 48.10 W, or UTM as 11 S 516726 5078031";

/**
 * Reads a typed position: decimal degrees, degrees and minutes, degrees minutes and seconds, with signs or with
 * letters N S E W, or UTM as zone, hemisphere, easting, northing. Without letters latitude comes first.
 */
export function parseCoordinates(text: string): ParsedPosition {
  const tidy = text.trim().toUpperCase().replace(/[−–]/g, '-').replace(/\s+/g, ' ');
  if (tidy === '') return refuse(EXAMPLES);
  const utm = /^(?:UTM |ZONE )*(\d{1,2}) ?([A-Z])(?:ORTH|OUTH)?[ ,;:]+(?:E ?)?(\d{5,7}(?:\.\d+)?) ?(?:M ?)?E?[ ,;]+(?:N ?)?(\d{1,8}(?:\.\d+)?) ?(?:M ?)?N?$/.exec(tidy);
  return utm ? readUtm(Number(utm[1]), utm[2]!, Number(utm[3]), Number(utm[4])) : readDegrees(tidy);
}

function readUtm(zone: number, letter: string, eastingM: number, northingM: number): ParsedPosition {
  if (letter !== 'N' && letter !== 'S') return refuse(`After the UTM zone write N or S for the hemisphere, not ${letter}`);
  if (zone < 1 || zone > 60) return refuse(`UTM zones run from 1 to 60, not ${zone}`);
  if (eastingM < 100_000 || eastingM > 900_000) return refuse(`A UTM easting lies between 100000 and 900000 m, not ${eastingM}`);
  if (northingM > 10_000_000) return refuse(`A UTM northing lies between 0 and 10000000 m, not ${northingM}`);
  return inWorld(fromUtm({ zone, hemisphere: letter, eastingM, northingM }), 'utm');
}

type Angle = { value: number; axis: 'lat' | 'lon' | null; parts: number };

function readDegrees(text: string): ParsedPosition {
  const halves = splitPair(text);
  if (!halves) return refuse(EXAMPLES);
  const first = readAngle(halves[0]);
  const second = readAngle(halves[1]);
  if (typeof first === 'string') return refuse(first);
  if (typeof second === 'string') return refuse(second);
  if (first.axis !== null && first.axis === second.axis) return refuse(`Both figures are ${first.axis === 'lat' ? 'latitudes' : 'longitudes'}: give one of each`);
  const lonFirst = first.axis === 'lon' || second.axis === 'lat' || (first.axis === null && second.axis === null && Math.abs(first.value) > 90);
  const [lat, lon] = lonFirst ? [second.value, first.value] : [first.value, second.value];
  return inWorld([lon, lat], first.parts > 1 || second.parts > 1 ? 'minutes' : 'decimal');
}

/** Cuts the text into its two angles: after a letter, at a semicolon, at a comma with a gap, at any comma, or in the middle of the figures. */
function splitPair(text: string): [string, string] | null {
  const cuts = [/^([^NSEW]+[NSEW])[ ,;]*([^NSEW]+[NSEW])$/, /^([NSEW][^NSEW]+?)[ ,;]*([NSEW][^NSEW]+)$/, /^([^;]+);([^;]+)$/, /^([^,]+(?:,\d+)?), ([^,]+(?:,\d+)?)$/, /^([^,]+),([^,]+)$/];
  for (const cut of cuts) {
    const found = cut.exec(text);
    if (found) return [found[1]!.trim(), found[2]!.trim()];
  }
  const figures = text.split(' ');
  if (figures.length < 2 || figures.length > 6 || figures.length % 2 === 1) return null;
  return [figures.slice(0, figures.length / 2).join(' '), figures.slice(figures.length / 2).join(' ')];
}

function readAngle(text: string): Angle | string {
  const letter = /[NSEW]/.exec(text)?.[0] ?? null;
  const bare = text.replace(/[NSEW]/g, ' ').replace(/[°º'’′"”″:]|DEG|MIN|SEC/g, ' ').trim();
  const figures = bare.replace(/(\d),(\d)/g, '$1.$2').split(/\s+/);
  if (figures.length > 3 || !figures.every((figure, k) => (k === 0 ? /^[-+]?\d+(\.\d+)?$/ : /^\d+(\.\d+)?$/).test(figure))) return `"${text}" is not an angle. ${EXAMPLES}`;
  const [degrees = 0, minutes = 0, seconds = 0] = figures.map(Number);
  if (figures.length > 1 && (!Number.isInteger(degrees) || minutes >= 60 || seconds >= 60)) return `In "${text}" minutes and seconds must be below 60 and degrees a whole number`;
  const negative = figures[0]!.startsWith('-');
  if (negative && letter) return `"${text}" has both a minus sign and a letter: leave one out`;
  const size = Math.abs(degrees) + minutes / 60 + seconds / 3_600;
  return { value: negative || letter === 'S' || letter === 'W' ? -size : size, axis: letter === null ? null : letter === 'N' || letter === 'S' ? 'lat' : 'lon', parts: figures.length };
}

function inWorld([lon, lat]: LonLat, style: CoordinateStyle): ParsedPosition {
  if (!(Math.abs(lat) <= 85)) return refuse(`The map runs from 85° S to 85° N: latitude ${lat.toFixed(4)} is off it`);
  if (!(Math.abs(lon) <= 180)) return refuse(`Longitude runs from -180 to 180 degrees, not ${lon.toFixed(4)}`);
  return { ok: true, position: [lon, lat], style };
}
