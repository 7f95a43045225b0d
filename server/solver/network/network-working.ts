import type { WorkingLine } from '../../../shared/schemas/estimate-result';
import { durationText, lengthText, sig } from '../format';
import type { NetworkRun } from './run';

/** How the river was followed: step, parcels, tubes, and what each reach adds to plain flow. */
export function networkRunWorking(runs: readonly NetworkRun[]): WorkingLine[] {
  const steps = runs.map(({ release, resolution, tubes, mostParcels }): WorkingLine => ({
    label: `Step of ${release.release.name}`,
    formula: 'parcels of water one step long move with the flow; dispersion along and mixing across are implicit',
    substituted: `${resolution.steps} steps, up to ${mostParcels} parcels, ${tubes.count} tubes${resolution.perSigma === null ? '' : `; ${sig(resolution.perSigma, 3)} steps in the standard deviation of the sharpest passage`}`,
    value: resolution.stepS,
    unit: 's',
    source: 'unit Courant number; Crank & Nicolson 1947; Yotsukura & Sayre 1976',
  }));
  const seen = new Set<string>();
  const extras = runs.flatMap(({ flow }) =>
    flow.reaches.flatMap(({ state, wave }): WorkingLine[] => {
      const { reach } = state;
      if (seen.has(reach.id)) return [];
      seen.add(reach.id);
      const lines: WorkingLine[] = [];
      if (reach.storage) lines.push({ label: `${reach.name}: dead zones`, formula: 'dC/dt = a (Cs − C), dCs/dt = a (A/As)(C − Cs)', substituted: `As/A = ${sig(reach.storage.areaRatio)}, a = ${sig(reach.storage.exchangePerS)} 1/s`, value: reach.storage.areaRatio, unit: 'times', source: 'Bencala & Walters 1983' });
      if (reach.structure) lines.push({ label: `${reach.name}: ${reach.structure.kind} at its head`, formula: 'residence V/Q, stirred tanks in a row', substituted: `${sig(reach.structure.volumeM3)} m³ / ${sig(state.dischargeM3s)} m³/s in ${reach.structure.tanks} ${reach.structure.tanks === 1 ? 'tank' : 'tanks'} = ${durationText(reach.structure.volumeM3 / state.dischargeM3s)}`, value: reach.structure.volumeM3 / state.dischargeM3s, unit: 's', source: 'Levenspiel 1972' });
      if (reach.tide) lines.push({ label: `${reach.name}: tidal current`, formula: 'U + a cos(2π (t − t_ebb)/T)', substituted: `a = ${sig(reach.tide.amplitudeMps)} m/s at its lower end, T = ${durationText(reach.tide.periodS)}, largest ebb ${durationText(reach.tide.maxEbbS)} after T0`, value: reach.tide.amplitudeMps, unit: 'm/s', source: 'water register' });
      if (wave) lines.push({ label: `${reach.name}: changing discharge`, formula: '∂A/∂t + ∂Q/∂x = 0, celerity dQ/dA = U/(1 − b)', substituted: `at its head ${sig(wave.dischargeM3s(0, 0))} m³/s at T0`, value: wave.dischargeM3s(0, 0), unit: 'm³/s', source: 'Lighthill & Whitham 1955' });
      return lines;
    }),
  );
  return [...steps, ...extras];
}

/** Distance and plain travel time to a receptor, for each release that reaches it. */
export function networkReceptorWorking(items: readonly { run: NetworkRun; xM: number }[]): WorkingLine[] {
  return items.flatMap(({ run, xM }): WorkingLine[] => {
    const suffix = items.length > 1 ? ` (${run.release.release.name})` : '';
    const travelS = run.flow.travelS(run.sourceM, xM);
    return [
      { label: `Distance along the river${suffix}`, formula: 'sum of chainages passed', substituted: lengthText(xM - run.sourceM), value: xM - run.sourceM, unit: 'm', source: 'chainage of the water register' },
      { label: `Travel time at the river's own flow${suffix}`, formula: 'T = Σ L/U', substituted: `${durationText(travelS)}, without tide, dead zones, stirred water or changes of discharge`, value: travelS, unit: 's', source: 'mean velocity of each reach' },
    ];
  });
}
