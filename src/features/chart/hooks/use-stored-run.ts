import { useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { apiPaths } from '../../../../shared/api-paths';
import { api } from '../../../lib/api-client';
import { readEstimateStream } from '../../../lib/estimate-stream';
import { runQuery } from '../api';
import { emptyForecast, withMessage, type Forecast } from '../model/forecast';

type Loaded = { runId: string; forecast: Forecast; isWhole: boolean; isBroken: boolean };

/** A stored run with its frames; one that is still being solved grows as its messages come. */
export function useStoredRun(runId: string | null) {
  const run = useQuery({ ...runQuery(runId ?? ''), enabled: runId !== null });
  const [loaded, setLoaded] = useState<Loaded | null>(null);

  useEffect(() => {
    if (!runId) return;
    const abort = new AbortController();
    let forecast = emptyForecast;
    let isAsked = false;
    const publish = (isWhole: boolean, isBroken = false) => {
      isAsked = false;
      if (!abort.signal.aborted) setLoaded({ runId, forecast, isWhole, isBroken });
    };
    const read = async () => {
      const response = await api.raw('GET', apiPaths.runFrames(runId), undefined, { signal: abort.signal });
      await readEstimateStream(response, (message) => {
        forecast = withMessage(forecast, message);
        if (isAsked) return;
        isAsked = true;
        requestAnimationFrame(() => publish(false));
      });
      publish(true);
    };
    read().catch(() => publish(false, true));
    return () => abort.abort();
  }, [runId]);

  const own = loaded?.runId === runId ? loaded : null;
  return { run: run.data ?? null, error: run.error, forecast: own?.forecast ?? null, isBroken: own?.isBroken ?? false };
}
