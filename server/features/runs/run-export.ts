import { setImmediate as breathe } from 'node:timers/promises';
import { instantMs, isoWithOffset } from '../../../shared/civil';
import { decodeValue, type FrameHead, MessageReader } from '../../../shared/frames';
import { Outliner } from '../../../shared/outlines';
import type { EstimateDocument } from '../../../shared/schemas/estimate';
import type { EstimateResult } from '../../../shared/schemas/estimate-result';
import type { Marking } from '../../../shared/schemas/incidents';
import { reachStates } from '../../solver/river/reach-state';
import type { RunRepository } from './run.repository';

export const GEOJSON_TYPE = 'application/geo+json';
const BATCH = 8;
const NOTE = 'An estimate for qualified people. Orders come from the incident commander and the competent authority; local rules and licensed review come first. Outlines lie within about a tenth of a cell, or of a river\'s width.';

export type ExportInput = { id: string; revisionNumber: number; marking: Marking; document: EstimateDocument; result: EstimateResult };
type Feature = { type: 'Feature'; properties: Record<string, unknown>; geometry: { type: string; coordinates: unknown } };

/**
 * A run as one GeoJSON feature collection (RFC 7946), a piece at a time: releases and receptors, outline of all that is
 * reached, lines of first arrival, then the contours of every frame, or of the one asked for. Between frames other
 * requests get their turn.
 */
export async function* exportRun(run: ExportInput, repository: RunRepository, frameIndex: number | null, signal: AbortSignal): AsyncGenerator<Uint8Array> {
  const text = new TextEncoder();
  const { marking, document, result, id, revisionNumber } = run;
  const head = { type: 'FeatureCollection', name: document.title, marking, run: id, revision: revisionNumber, engine: result.engineVersion, solver: result.solver, startAt: document.startAt, note: NOTE };
  yield text.encode(`${JSON.stringify(head).slice(0, -1)},"features":[\n`);
  let isFirst = true;
  const lines = (features: Feature[]): Uint8Array => {
    const joined = features.map((feature) => JSON.stringify(feature)).join(',\n');
    const out = text.encode(isFirst || joined === '' ? joined : `,\n${joined}`);
    isFirst &&= joined === '';
    return out;
  };
  yield lines([...placesOf(run), ...reachedOf(run)]);
  for await (const { head: frame, payload } of framesOf(id, repository, frameIndex, signal)) {
    yield lines(contoursOf(run, frame, payload));
    await breathe();
  }
  yield text.encode('\n]}\n');
}

const at = ({ document }: ExportInput, timeS: number): string => isoWithOffset(instantMs(document.startAt) + timeS * 1_000, document.startAt.match(/(Z|[+-]\d\d:\d\d)$/)![0]);

const point = (coordinates: readonly number[], properties: Record<string, unknown>): Feature => ({ type: 'Feature', properties, geometry: { type: 'Point', coordinates } });
const area = (coordinates: unknown, properties: Record<string, unknown>): Feature => ({ type: 'Feature', properties, geometry: { type: 'MultiPolygon', coordinates } });

function placesOf(run: ExportInput): Feature[] {
  const { document, result } = run;
  const answers = new Map(result.receptors.map((answer) => [answer.receptorId, answer] as const));
  return [
    ...document.releases.map(({ id, name, position }) => point(position, { kind: 'release', id, name })),
    ...document.receptors.map(({ id, code, name, position }) => {
      const answer = answers.get(id);
      const arrivals = (answer?.answers ?? []).map(({ value, verdict, arrivalS: { early, likely, late } }) => ({ value, unit: result.unit, verdict, earliestAt: early && at(run, early), likelyAt: likely && at(run, likely), latestAt: late && at(run, late) }));
      return point(position, { kind: 'receptor', id, code, name, verdict: answer?.verdict ?? null, peak: answer?.peak.likely ?? null, unit: result.unit, peakAt: answer?.peakS ? at(run, answer.peakS) : null, arrivals });
    }),
  ];
}

function reachedOf(run: ExportInput): Feature[] {
  const { reached, unit } = run.result;
  if (!reached) return [];
  const { value, isActionValue } = reached;
  return [
    area(reached.envelopePolygons, { kind: 'reached at any time', value, unit, isActionValue }),
    ...reached.isochrones.map(({ timeS, polygons }) => area(polygons, { kind: 'reached by', timeS, at: at(run, timeS), value, unit, isActionValue })),
  ];
}

/** Frames as they were stored, each read when its turn comes. */
async function* framesOf(runId: string, repository: RunRepository, index: number | null, signal: AbortSignal): AsyncGenerator<{ head: FrameHead; payload: Uint8Array }> {
  for (let position = -1; !signal.aborted; ) {
    const rows = await repository.messagesAfter(runId, position, BATCH);
    for (const row of rows) {
      position = row.position;
      for (const { head, payload } of new MessageReader().push(row.message)) if (head.type === 'frame' && (index === null || head.index === index)) yield { head, payload };
    }
    if (rows.length < BATCH) return;
  }
}

function contoursOf(run: ExportInput, head: FrameHead, payload: Uint8Array): Feature[] {
  const { water } = run.document;
  const widths = new Map(water.kind === 'river' ? reachStates(water).map((state) => [state.reach.id, state.widthM] as const) : []);
  const outliner = new Outliner(water, (reach) => widths.get(reach.id) ?? 1);
  const codes = new Uint16Array(payload.buffer, payload.byteOffset, payload.byteLength / 2);
  const values = Float64Array.from(codes, (code) => decodeValue(code, head.scale));
  const time = { frame: head.index, timeS: head.timeS, at: at(run, head.timeS) };
  return run.result.levels.flatMap(({ value, isActionValue, label }) => {
    const { polygons } = outliner.above(head.grid, values, value);
    return polygons.length > 0 ? [area(polygons, { kind: 'at or above', ...time, value, unit: run.result.unit, label, isActionValue })] : [];
  });
}
