/** The server's clock as seen from here: a tablet whose own clock is wrong still counts down rightly. */

/** The Date header has whole seconds, and an answer takes its time: smaller differences mean nothing. */
const SMALLEST_SKEW_MS = 3_000;

let skewMs = 0;

/** Takes the Date header of an answer that has just come. */
export function noteServerDate(header: string | null, receivedAtMs: number): void {
  const serverMs = header === null ? Number.NaN : Date.parse(header);
  if (Number.isNaN(serverMs)) return;
  const difference = serverMs - receivedAtMs;
  skewMs = Math.abs(difference) < SMALLEST_SKEW_MS ? 0 : difference;
}

/** The present time by the server's clock, ms. */
export const serverNowMs = (): number => Date.now() + skewMs;
