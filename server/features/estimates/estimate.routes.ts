import type { Response } from 'express';
import { apiPaths } from '../../../shared/api-paths';
import { type StreamHead, writeMessage } from '../../../shared/frames';
import { type EstimateDocument, estimateDocumentSchema } from '../../../shared/schemas/estimate';
import type { Deps } from '../../deps';
import { STREAM_TYPE, flushNow, goneSignal } from '../../http/message-stream';
import { AppError } from '../../http/problems';
import { type Route, route } from '../../http/routes';
import { SolverInputError } from '../../solver/errors';
import { solveInWorker } from '../../workers/pool';

/** One thread solves everybody's previews: none may keep it longer than this. */
const PREVIEW_LIMIT_MS = 30_000;
const tooSlow = new SolverInputError([{ path: 'horizonS', message: `This forecast takes longer than ${PREVIEW_LIMIT_MS / 1_000} s: shorten the estimate, take fewer frames, releases or receptors, or save it as a revision, whose run may take its time` }]);

export function estimateRoutes(deps: Deps): Route[] {
  return [
    route({
      method: 'post', path: apiPaths.estimates, action: 'estimate:preview', tag: 'Estimates', summary: 'Solves an estimate document and streams the answer; nothing is stored',
      body: estimateDocumentSchema, produces: STREAM_TYPE,
      handle: async ({ body, res }) => {
        const gone = goneSignal(res);
        const late = AbortSignal.timeout(PREVIEW_LIMIT_MS);
        try {
          await solveInWorker(body, { preview: true, signal: AbortSignal.any([gone, late]), onMessage: (head, payload) => send(res, head, payload) });
        } catch (error) {
          if (!gone.aborted) refuse(deps, res, body, late.aborted ? tooSlow : error);
        }
        res.end();
      },
    }),
  ];
}

/** The first message sends the headers: until then the answer can still become a problem. */
function send(res: Response, head: StreamHead, payload: Uint8Array): void {
  if (res.destroyed) return;
  if (!res.headersSent) res.set({ 'content-type': STREAM_TYPE, 'cache-control': 'no-store' });
  res.write(writeMessage(head, payload));
  flushNow(res);
}

function refuse(deps: Deps, res: Response, document: EstimateDocument, error: unknown): void {
  if (!res.headersSent) {
    if (error instanceof SolverInputError) throw new AppError('cannot-be-estimated', error.message, { errors: error.errors });
    throw error;
  }
  deps.log(`estimate "${document.title}" of ${document.substance.name}: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`);
  const isInput = error instanceof SolverInputError;
  send(res, { type: 'failed', code: isInput ? 'cannot-be-estimated' : 'internal', title: 'This could not be estimated', detail: isInput ? error.message : `Quote ${res.locals.requestId} when you report this`, errors: isInput ? error.errors : [] }, new Uint8Array(0));
}
