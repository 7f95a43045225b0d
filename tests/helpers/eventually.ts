import { vi } from 'vitest';

/** Waits until the check holds. Long, because a loaded machine is slow; a check that holds ends it at once. */
export const eventually = (check: () => unknown): Promise<unknown> => vi.waitFor(check, { timeout: 30_000, interval: 20 });
