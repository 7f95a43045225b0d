/** What each case should reach: the least, and what good designs have reached. `lowerIsBetter` for counts and shares. */
export type Goal = { must: number; ambitious: number; stretch: number; lowerIsBetter?: true };

export const goals: Record<string, Goal> = {
  'puff-1': { must: 2.5, ambitious: 4.5, stretch: 7 },
  'puff-50': { must: 7, ambitious: 14, stretch: 25 },
  'puff-50-f32': { must: 5, ambitious: 9, stretch: 15 },
  'puff-500': { must: 10, ambitious: 18, stretch: 40 },
  'puff-js': { must: 2.5, ambitious: 3.8, stretch: 5 },
  'release-points': { must: 200, ambitious: 450, stretch: 1000 },
  'release-nodes': { must: 160, ambitious: 128, stretch: 96, lowerIsBetter: true },
  walk: { must: 4, ambitious: 6, stretch: 8 },
  channel: { must: 8, ambitious: 12, stretch: 25 },
  'fv-f64-256': { must: 6, ambitious: 9, stretch: 20 },
  'fv-f64-512': { must: 8, ambitious: 12, stretch: 20 },
  'poisson-256': { must: 20, ambitious: 34, stretch: 60 },
  'poisson-512': { must: 30, ambitious: 50, stretch: 90 },
  'poisson-iterations-256': { must: 16, ambitious: 11, stretch: 8, lowerIsBetter: true },
  'poisson-iterations-512': { must: 18, ambitious: 12, stretch: 8, lowerIsBetter: true },
  'contour-256': { must: 8, ambitious: 12, stretch: 30 },
  'contour-512': { must: 10, ambitious: 16, stretch: 30 },
  'payload-contours-256': { must: 0.25, ambitious: 0.15, stretch: 0.1, lowerIsBetter: true },
  'payload-raster-256': { must: 0.75, ambitious: 0.48, stretch: 0.35, lowerIsBetter: true },
  store: { must: 1.3, ambitious: 1, stretch: 0.8, lowerIsBetter: true },
  threads: { must: 0.85, ambitious: 0.95, stretch: 1 },
};

export function reached(name: string, ratio: number | null): string {
  const goal = goals[name];
  if (!goal || ratio === null) return 'not judged';
  const meets = (limit: number): boolean => (goal.lowerIsBetter ? ratio <= limit : ratio >= limit);
  return meets(goal.stretch) ? 'stretch' : meets(goal.ambitious) ? 'ambitious' : meets(goal.must) ? 'must' : 'below must';
}
