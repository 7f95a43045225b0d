import { z } from 'zod';
import { apiPaths } from '../../../shared/api-paths';
import { estimateLimits } from '../../../shared/schemas/estimate';
import { runCreateSchema, runSchema, runSummarySchema } from '../../../shared/schemas/incidents';
import type { Deps } from '../../deps';
import { STREAM_TYPE, goneSignal, sendMessages } from '../../http/message-stream';
import { AppError } from '../../http/problems';
import { type Route, route } from '../../http/routes';
import { exportRun, GEOJSON_TYPE } from './run-export';
import { runMessages } from './run-stream';
import { RunService } from './run.service';

const tag = 'Runs';
const scenarioParams = z.object({ scenarioId: z.string().min(1).max(64) });
const params = z.object({ runId: z.string().min(1).max(64) });
const id = ':runId';

export function runRoutes(deps: Deps): Route[] {
  const runs = new RunService(deps);
  return [
    route({
      method: 'get', path: apiPaths.scenarioRuns(':scenarioId'), action: 'incident:read', tag, summary: 'Lists the runs of a scenario, the newest first',
      params: scenarioParams, response: z.array(runSummarySchema),
      handle: ({ actor, params }) => runs.list(actor, params.scenarioId),
    }),
    route({
      method: 'post', path: apiPaths.scenarioRuns(':scenarioId'), action: 'run:create', tag, summary: 'Queues a further run of a saved revision',
      params: scenarioParams, body: runCreateSchema, response: runSummarySchema, status: 202,
      handle: async ({ actor, params, body, res }) => {
        const run = await runs.create(actor, params.scenarioId, body.revisionNumber);
        res.location(apiPaths.run(run.id));
        return run;
      },
    }),
    route({
      method: 'get', path: apiPaths.run(id), action: 'incident:read', tag, summary: 'Gives a run with its document and, when done, its result',
      params, response: runSchema,
      handle: ({ actor, params }) => runs.get(actor, params.runId),
    }),
    route({
      method: 'post', path: apiPaths.runCancel(id), action: 'run:cancel', tag, summary: 'Cancels a run that waits or is being solved',
      params, response: runSummarySchema,
      handle: ({ actor, params }) => runs.cancel(actor, params.runId),
    }),
    route({
      method: 'get', path: apiPaths.runFrames(id), action: 'incident:read', tag, summary: 'Gives the frames of a run as one stream of messages, live while it is solved',
      params, produces: STREAM_TYPE,
      handle: async ({ params, res }) => {
        const { state } = await runs.getHead(params.runId);
        const gone = goneSignal(res);
        res.set({ 'content-type': STREAM_TYPE, 'cache-control': state === 'done' ? 'private, max-age=31536000, immutable' : 'no-store' });
        res.flushHeaders();
        await sendMessages(res, runMessages(params.runId, runs.repository, deps.changes, gone), gone);
      },
    }),
    route({
      method: 'get', path: apiPaths.runExport(id), action: 'incident:read', tag, summary: 'Gives a solved run as GeoJSON: places, outline of all it reaches, lines of first arrival, contours of every frame or of the one named',
      params, query: z.object({ frame: z.coerce.number().int().min(0).max(estimateLimits.frames - 1).optional() }), produces: GEOJSON_TYPE,
      handle: async ({ params, query, res }) => {
        const run = await runs.getSolved(params.runId);
        const frame = query.frame ?? null;
        if (frame !== null && frame >= run.document.frameCount) throw new AppError('bad-input', `Frame ${frame}: this run has frames 0 to ${run.document.frameCount - 1}`, { errors: [{ path: 'frame', message: `Must be at most ${run.document.frameCount - 1}` }] });
        const gone = goneSignal(res);
        res.set({ 'content-type': GEOJSON_TYPE, 'content-disposition': `attachment; filename="run-${run.id}.geojson"`, 'cache-control': 'private, no-cache' });
        await sendMessages(res, exportRun(run, runs.repository, frame, gone), gone);
      },
    }),
  ];
}
