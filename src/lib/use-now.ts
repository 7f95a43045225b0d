import { useEffect, useState } from 'react';

/** The present time in ms, renewed every `periodMs`. `skewMs` corrects this device's clock by the server's. */
export function useNow(periodMs = 1_000, skewMs = 0): number {
  const [now, setNow] = useState(() => Date.now());
  useEffect(() => {
    const timer = setInterval(() => setNow(Date.now()), periodMs);
    return () => clearInterval(timer);
  }, [periodMs]);
  return now + skewMs;
}
