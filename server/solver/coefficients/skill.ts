/** How well estimates meet measurements. */
export type Skill = {
  /** Geometric mean of estimate over measurement. */
  readonly meanRatio: number;
  readonly withinTwo: number;
  readonly withinThree: number;
  /** Root mean square of the base-10 logarithm of the ratio. */
  readonly rmsLog10: number;
};

export function skillOf(pairs: readonly { readonly estimated: number; readonly measured: number }[]): Skill {
  const logs = pairs.map(({ estimated, measured }) => Math.log10(estimated / measured));
  const within = (factor: number): number => logs.filter((log) => Math.abs(log) <= Math.log10(factor)).length;
  return {
    meanRatio: 10 ** (logs.reduce((sum, log) => sum + log, 0) / logs.length),
    withinTwo: within(2),
    withinThree: within(3),
    rmsLog10: Math.sqrt(logs.reduce((sum, log) => sum + log * log, 0) / logs.length),
  };
}
