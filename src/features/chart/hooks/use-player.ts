import { useCallback, useEffect, useMemo, useState } from 'react';

/** Simulated hours that pass in one second of playing. */
export const speeds = [0.5, 1, 2, 4, 8] as const;

/** The shown time, s after the start, and playing it. */
export function usePlayer(horizonS: number, frameTimesS: readonly number[]) {
  const [timeS, setTimeS] = useState(0);
  const [isPlaying, setPlaying] = useState(false);
  const [hoursPerSecond, setSpeed] = useState<number>(1);
  // Nothing is drawn before the first frame, so the hand starts there.
  const firstS = frameTimesS[0] ?? 0;
  const shownS = Math.min(Math.max(timeS, firstS), horizonS);

  useEffect(() => {
    if (!isPlaying) return;
    let last = performance.now();
    let request = requestAnimationFrame(function tick(now: number) {
      const passed = (now - last) / 1_000;
      last = now;
      setTimeS((at) => Math.min(horizonS, at + passed * hoursPerSecond * 3_600));
      request = requestAnimationFrame(tick);
    });
    return () => cancelAnimationFrame(request);
  }, [isPlaying, hoursPerSecond, horizonS]);

  const isAtEnd = shownS >= horizonS;
  useEffect(() => {
    if (isPlaying && isAtEnd) setPlaying(false);
  }, [isPlaying, isAtEnd]);

  const goTo = useCallback((s: number) => setTimeS(Math.min(horizonS, Math.max(0, s))), [horizonS]);
  const step = useCallback(
    (direction: 1 | -1) => {
      setPlaying(false);
      setTimeS((stored) => {
        const at = Math.max(stored, frameTimesS[0] ?? 0);
        const next = direction === 1 ? frameTimesS.find((time) => time > at + 0.5) : [...frameTimesS].reverse().find((time) => time < at - 0.5);
        return next ?? (direction === 1 ? horizonS : 0);
      });
    },
    [frameTimesS, horizonS],
  );
  const toggle = useCallback(() => {
    setPlaying((playing) => !playing);
    setTimeS((at) => (at >= horizonS ? 0 : at));
  }, [horizonS]);

  return useMemo(() => ({ timeS: shownS, isPlaying, hoursPerSecond, setSpeed, goTo, step, toggle, pause: () => setPlaying(false) }), [shownS, isPlaying, hoursPerSecond, goTo, step, toggle]);
}
export type Player = ReturnType<typeof usePlayer>;
