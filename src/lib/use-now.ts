import { useEffect, useState } from 'react';
import { serverNowMs } from './server-clock';

/** The present time by the server's clock, ms, renewed every `periodMs`. */
export function useNow(periodMs = 1_000): number {
  const [now, setNow] = useState(serverNowMs);
  useEffect(() => {
    const timer = setInterval(() => setNow(serverNowMs()), periodMs);
    return () => clearInterval(timer);
  }, [periodMs]);
  return now;
}
