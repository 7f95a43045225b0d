import { useEffect, useMemo, useRef, useState } from 'react';
import { apiPaths } from '../../../../shared/api-paths';
import type { FieldError } from '../../../../shared/problem';
import type { EstimateDocument } from '../../../../shared/schemas/estimate';
import { api, ApiError } from '../../../lib/api-client';
import { readEstimateStream } from '../../../lib/estimate-stream';
import { emptyForecast, withMessage, type Forecast } from '../model/forecast';

/** Short enough not to be felt, long enough for one solution per burst of key strokes. */
const WAIT_MS = 60;

export type LiveEstimate = {
  forecast: Forecast | null;
  /** The document the shown forecast belongs to; map and table read water and receptors from it. */
  document: EstimateDocument | null;
  /** True while the shown forecast belongs to an earlier draft. */
  isBehind: boolean;
  failure: { text: string; errors: FieldError[] } | null;
};

type Shown = { key: string; document: EstimateDocument; forecast: Forecast };

const failureOf = (error: unknown): { text: string; errors: FieldError[] } =>
  error instanceof ApiError ? { text: `${error.problem.title}. ${error.problem.detail}`, errors: error.problem.errors ?? [] } : { text: 'The forecast broke off: change something or reload the page', errors: [] };

/** Solves every change of a valid document; the answer before stays on the map until the first contours of the next are here. */
export function useLiveEstimate(document: EstimateDocument | null): LiveEstimate {
  const key = useMemo(() => (document ? JSON.stringify(document) : ''), [document]);
  const [shown, setShown] = useState<Shown | null>(null);
  const [failure, setFailure] = useState<(ReturnType<typeof failureOf> & { key: string }) | null>(null);
  const latest = useRef(document);
  useEffect(() => {
    latest.current = document;
  }, [document]);

  useEffect(() => {
    const wanted = latest.current;
    if (!key || !wanted) return;
    performance.mark('forecast-input');
    const abort = new AbortController();
    const timer = setTimeout(() => void solve(wanted, key, abort, setShown, setFailure), WAIT_MS);
    return () => {
      clearTimeout(timer);
      abort.abort();
    };
  }, [key]);

  return { forecast: shown?.forecast ?? null, document: shown?.document ?? null, isBehind: shown !== null && shown.key !== key, failure: failure?.key === key ? failure : null };
}

async function solve(
  document: EstimateDocument,
  key: string,
  abort: AbortController,
  show: (shown: Shown) => void,
  fail: (failure: (ReturnType<typeof failureOf> & { key: string }) | null) => void,
): Promise<void> {
  let forecast = emptyForecast;
  let isAsked = false;
  let isMarked = false;
  const publish = () => {
    isAsked = false;
    if (abort.signal.aborted) return;
    show({ key, document, forecast });
    if (isMarked) return;
    isMarked = true;
    performance.measure('forecast-first-contour', 'forecast-input');
  };
  try {
    const response = await api.raw('POST', apiPaths.estimates, document, { signal: abort.signal });
    await readEstimateStream(response, (message) => {
      forecast = withMessage(forecast, message);
      if (message.type === 'failed') fail({ key, text: `${message.title}. ${message.detail}`, errors: message.errors });
      const isWorthShowing = forecast.frames.length > 0 || forecast.result !== null;
      if (isAsked || !isWorthShowing) return;
      isAsked = true;
      requestAnimationFrame(publish);
    });
    if (forecast.failed === null) fail(null);
  } catch (error) {
    if (!abort.signal.aborted) fail({ key, ...failureOf(error) });
  }
}
