import { describe, expect, it } from 'vitest';
import type { EstimateDocument, EstimateDocumentInput } from '../../shared/schemas/estimate';
import { NO_ESTIMATE } from '../../shared/frames';
import { jetLengths } from '../../server/solver/physics/buoyant-jet';
import { expectClose } from './close-to';
import { at, openDocument, reachOf, receptor, release, riverDocument, solve } from './documents';

type Rest = Partial<Omit<EstimateDocumentInput, 'water'>>;
type Reach = Parameters<typeof reachOf>[1];
type OpenOver = Parameters<typeof openDocument>[0];

/** A river of 40 m by 1.5 m at 0.5 m/s; mixing across takes 0.4 W^2/e = 1,280 s, mixing over depth 0.4 U H^2/(0.067 H u*) = 89.6 m. */
const figures = { id: 'r', lengthKm: 500, Q: 30, W: 40, H: 1.5, U: 0.5, D: 20, e: 0.5 };
const river = (distanceM: number, rest: Rest = {}, over: Reach = {}, change: Partial<typeof figures> = {}): EstimateDocument => {
  const reach = { ...figures, ...change };
  return riverDocument([reachOf(reach, over)], {
    horizonS: Math.max(7_200, (3 * distanceM) / reach.U),
    releases: [release({ channel: { reachId: 'r', chainageKm: reach.lengthKm, bank: 'mid' } })],
    receptors: [receptor({ position: at(distanceM, 0), channel: { reachId: 'r', chainageKm: reach.lengthKm - distanceM / 1_000, bank: 'mid' } })],
    ...rest,
  });
};
const riverRelease = (over: Partial<Parameters<typeof release>[0]> = {}) => [release({ channel: { reachId: 'r', chainageKm: 500, bank: 'mid' }, ...over })];
const open = (over: OpenOver = {}, rest: Rest = {}): EstimateDocument => openDocument(over, rest);
const to = (x: number, over: Partial<Parameters<typeof receptor>[0]> = {}) => [receptor({ position: at(x, 0), ...over })];
const substance = (over: Partial<EstimateDocumentInput['substance']>): Rest => ({ substance: { name: 'Tracer', ...over } });

const peakOf = (doc: EstimateDocument): number => solve(doc, { preview: true }).result.receptors[0]!.peak.likely!;
const peakTimeOf = (doc: EstimateDocument): number => solve(doc, { preview: true }).result.receptors[0]!.peakS!;

/** Peak and its time in the standing cases; the limits below are laid just beside them. */
const openPeak = peakOf(open());
const riverPeak = peakOf(river(5_000));
const riverPeakS = peakTimeOf(river(5_000));
/** g' h / U^2 = 1 at this share of density difference: standing open water is 5 m deep at 0.2 m/s. */
const sharePast = (value: number): number => (value * 0.2 ** 2) / (9.81 * 5);
/** Density of a light product that gives a stated difference at a concentration: C (1/rho_s - 1/rho_w) = share. */
const densityFor = (share: number, concentration: number): number => 1 / (1 / 1_000 + share / concentration);
const strong = { amount: { how: 'mass' as const, massKg: { likely: 1e6 } } };
const strongPeak = 1e4 * openPeak;

type Case = readonly [rule: number, code: string, severity: 'note' | 'warn' | 'stop', tripped: EstimateDocument, quiet: EstimateDocument];

const cases: Case[] = [
  [1, 'near-field', 'stop', river(14.9), river(15.1)],
  [1, 'near-field', 'stop', open({}, { receptors: to(49) }), open({}, { receptors: to(51) })],
  // A jet of 4 m3/s at 9 m/s: bending length 6/0.2 = 30 m, ten times it 300 m, above fifty depths of 5 m.
  [1, 'near-field', 'stop', open({}, { receptors: to(299), conditions: { dischargeJet: { flowM3s: 4, speedMps: 9, densityKgM3: 1_000 } } }), open({}, { receptors: to(301), conditions: { dischargeJet: { flowM3s: 4, speedMps: 9, densityKgM3: 1_000 } } })],
  [2, 'depth-mixing', 'warn', river(89), river(90)],
  [2, 'depth-mixing', 'warn', open({}, { receptors: to(249) }), open({}, { receptors: to(251) })],
  // Mid-channel: 2 exp(-4 pi^2 tau) = 5 % at tau 0.0934.
  [3, 'across-mixing', 'warn', river(145), river(155)],
  [4, 'early-regime', 'warn', river(639), river(641)],
  // sigma on arrival sqrt(2 D x/U) = 632 m of a point; radius R adds R/2 to it: R/2 = 0.3 sqrt(632^2 + (R/2)^2) at R = 397.8 m.
  [5, 'first-size', 'warn', river(5_000, { releases: riverRelease({ initialRadiusM: 402 }) }), river(5_000, { releases: riverRelease({ initialRadiusM: 394 }) })],
  // A volume over 1.5 m of depth stands for a disk as well.
  [5, 'first-size', 'warn', river(5_000, { releases: riverRelease({ spilledVolumeM3: Math.PI * 1.5 * 385 ** 2 }) }), river(5_000, { releases: riverRelease({ spilledVolumeM3: Math.PI * 1.5 * 375 ** 2 }) })],
  [5, 'first-size', 'warn', open({}, { releases: [release({ initialRadiusM: 120 })] }), open({}, { releases: [release({ initialRadiusM: 100 })] })],
  [5, 'long-release', 'note', river(5_000, { releases: riverRelease({ timing: { kind: 'steady', durationS: 2_400 } }) }), river(5_000, { releases: riverRelease({ timing: { kind: 'steady', durationS: 2_000 } }) })],
  [6, 'capped', 'warn', river(5_000, substance({ solubilityKgM3: 0.9 * riverPeak })), river(5_000, substance({ solubilityKgM3: 1e3 }))],
  [6, 'at-strength', 'warn', open({}, { releases: [release({ spilledVolumeM3: (100 / openPeak) * 1.01 })] }), open({}, { releases: [release({ spilledVolumeM3: (100 / openPeak) * 0.99 })] })],
  [6, 'above-density', 'warn', open({}, { releases: [release(strong)], ...substance({ densityKgM3: 0.99 * strongPeak }) }), open({}, { releases: [release(strong)], ...substance({ densityKgM3: 1.01 * strongPeak }) })],
  [7, 'floats', 'warn', open({}, substance({ densityKgM3: 870, solubilityKgM3: 0.99 })), open({}, substance({ densityKgM3: 870, solubilityKgM3: 1 }))],
  [8, 'sinks', 'warn', open({}, substance({ densityKgM3: 1_480, solubilityKgM3: 9.9 })), open({}, substance({ densityKgM3: 1_480, solubilityKgM3: 10 }))],
  [9, 'density-layering', 'stop', open({}, { releases: [release(strong)], ...substance({ densityKgM3: densityFor(sharePast(1.01), strongPeak) }) }), open({}, { releases: [release(strong)], ...substance({ densityKgM3: densityFor(sharePast(0.99), strongPeak) }) })],
  [9, 'density-tends', 'warn', open({}, { releases: [release(strong)], ...substance({ densityKgM3: densityFor(sharePast(0.101), strongPeak) }) }), open({}, { releases: [release(strong)], ...substance({ densityKgM3: densityFor(sharePast(0.099), strongPeak) }) })],
  // u* = U/10 = 0.05 m/s over 1.5 m: 1 at a step of 0.1699 kg/m3; the product at 2,000 kg/m3 makes half its concentration of it.
  [9, 'gravity-spreading', 'warn', river(5_000, { releases: riverRelease({ spilledVolumeM3: 100 / 0.345 }), ...substance({ densityKgM3: 2_000 }) }), river(5_000, { releases: riverRelease({ spilledVolumeM3: 100 / 0.335 }), ...substance({ densityKgM3: 2_000 }) })],
  // 9.81 step 5 / (1000 0.2^2) = 0.25 at 0.2039 kg/m3.
  [10, 'layers', 'warn', open({}, { conditions: { stratification: { densityStepKgM3: 0.206, layerDepthM: 5 } } }), open({}, { conditions: { stratification: { densityStepKgM3: 0.202, layerDepthM: 5 } } })],
  [10, 'layers-mixed', 'stop', open({}, { conditions: { stratification: { densityStepKgM3: 2, layerDepthM: 4.9 } } }), open({}, { conditions: { stratification: { densityStepKgM3: 2, layerDepthM: 5 } } })],
  // 0.025 9.81 Qf / (500 0.5^3) = 0.8 at 203.9 m3/s, 0.08 at 20.39 m3/s.
  [10, 'estuary-layered', 'stop', open({}, { conditions: { estuary: { freshM3s: 206, widthM: 500, tidalSpeedMps: 0.5 } } }), open({}, { conditions: { estuary: { freshM3s: 202, widthM: 500, tidalSpeedMps: 0.5 } } })],
  [10, 'estuary-partly-layered', 'warn', open({}, { conditions: { estuary: { freshM3s: 20.6, widthM: 500, tidalSpeedMps: 0.5 } } }), open({}, { conditions: { estuary: { freshM3s: 20.2, widthM: 500, tidalSpeedMps: 0.5 } } })],
  [11, 'weak-current', 'warn', open({ current: [{ kind: 'residual', speedMps: 0.0199, towardDeg: 90 }] }), open({ current: [{ kind: 'residual', speedMps: 0.0201, towardDeg: 90 }], mixing: { kind: 'constant', alongM2s: 1, acrossM2s: 1 } })],
  // Drift U t = sqrt(2 K t) at K = U^2 t/2 = 720 m2/s.
  [11, 'weak-current', 'warn', open({ mixing: { kind: 'constant', alongM2s: 725, acrossM2s: 725 } }), open({ mixing: { kind: 'constant', alongM2s: 715, acrossM2s: 715 } })],
  [12, 'rising-stage', 'warn', river(5_000, { conditions: { dischargeChangeM3sPerS: (-0.202 * 30) / riverPeakS } }), river(5_000, { conditions: { dischargeChangeM3sPerS: (0.198 * 30) / riverPeakS } })],
  [13, 'dead-zones', 'warn', river(5_000, { conditions: { deadZoneShare: 0.31 } }), river(5_000, { conditions: { deadZoneShare: 0.3 } })],
  [13, 'dead-zones', 'warn', river(5_000, { conditions: { isWeedyOrBraided: true } }), river(5_000, { conditions: { isWeedyOrBraided: false } })],
  [13, 'reservoir', 'warn', river(5_000, { conditions: { hasReservoir: true } }), river(5_000, { conditions: { hasReservoir: false } })],
  [14, 'tidal-reach', 'stop', river(5_000, {}, { tidal: true }), river(5_000)],
  [14, 'tide-missing', 'warn', open({ waterKind: 'estuary' }), open({ waterKind: 'estuary', current: [{ kind: 'residual', speedMps: 0.2, towardDeg: 90 }, { kind: 'tide', majorMps: 0.3, floodTowardDeg: 90, periodS: 44_712, maxFloodS: 0 }] })],
  [15, 'ice', 'warn', river(5_000, { conditions: { ice: true } }), river(5_000, { conditions: { ice: false } })],
  [16, 'reactive', 'warn', river(5_000, substance({ behaviour: { isReactive: true, gas: 'hydrogen cyanide' } })), river(5_000, substance({ behaviour: { isReactive: false } }))],
  // 100 kg at 20 eq/kg over 100 s is 20 eq/s; the river brings 30 m3/s.
  [16, 'acid-flux', 'warn', river(5_000, { conditions: { alkalinityEqM3: 0.66 }, releases: riverRelease({ timing: { kind: 'steady', durationS: 100 } }), ...substance({ behaviour: { isAcidOrBase: true, equivalentsPerKg: 20 } }) }), river(5_000, { conditions: { alkalinityEqM3: 0.67 }, releases: riverRelease({ timing: { kind: 'steady', durationS: 100 } }), ...substance({ behaviour: { isAcidOrBase: true, equivalentsPerKg: 20 } }) })],
  [17, 'sorbing', 'warn', river(5_000, { conditions: { suspendedKgM3: 0.1 }, ...substance({ behaviour: { kdM3Kg: 1.01 } }) }), river(5_000, { conditions: { suspendedKgM3: 0.1 }, ...substance({ behaviour: { kdM3Kg: 0.99 } }) })],
  [17, 'sorbing', 'warn', river(5_000, substance({ behaviour: { settlingMps: (0.101 * 1.5) / riverPeakS } })), river(5_000, substance({ behaviour: { settlingMps: (0.099 * 1.5) / riverPeakS } }))],
  [18, 'oxygen-demand', 'warn', river(5_000, { releases: riverRelease({ amount: { how: 'mass', massKg: { likely: (100 * 3.03e-3) / 1.5 / riverPeak } } }), ...substance({ behaviour: { oxygenDemandKgPerKg: 1.5 } }) }), river(5_000, { releases: riverRelease({ amount: { how: 'mass', massKg: { likely: (100 * 2.97e-3) / 1.5 / riverPeak } } }), ...substance({ behaviour: { oxygenDemandKgPerKg: 1.5 } }) })],
  [19, 'beach', 'warn', open({}, { receptors: to(3_000, { kind: 'bathing' }) }), open({}, { receptors: to(3_000, { kind: 'intake' }) })],
  [19, 'beach', 'warn', open({}, { conditions: { isSurfZone: true } }), open({}, { conditions: { isSurfZone: false } })],
  [19, 'okubo-range', 'warn', open({ mixing: { kind: 'okubo' } }, { receptors: to(715) }), open({ mixing: { kind: 'okubo' } }, { receptors: to(725) })],
  [20, 'extrapolation-shape', 'warn', river(5_000, {}, { dispersionM2s: null }, { W: 14.9 }), river(5_000, {}, { dispersionM2s: null }, { W: 15.1 })],
  [20, 'extrapolation-time', 'warn', river(1_790), river(1_810)],
  [20, 'extrapolation-time', 'warn', river(361_000), river(359_000)],
  [20, 'extrapolation-flow', 'warn', river(5_000, { conditions: { meanDischargeM3s: 301 } }), river(5_000, { conditions: { meanDischargeM3s: 299 } })],
  [20, 'extrapolation-flow', 'warn', river(5_000, { conditions: { meanDischargeM3s: 5.99 } }), river(5_000, { conditions: { meanDischargeM3s: 6.01 } })],
  [20, 'extrapolation-age', 'warn', open({}, { horizonS: 31 * 86_400, releases: [release({ timing: { kind: 'instantaneous', atS: -60 } })] }), open({}, { horizonS: 31 * 86_400 })],
];

const checksOf = (doc: EstimateDocument) => solve(doc, { preview: true }).result.checks;

describe('the rules that say when an estimate is not to be trusted', () => {
  it.each(cases.map(([rule, code, severity, tripped, quiet]) => ({ rule, code, severity, tripped, quiet })))('rule $rule, $code, speaks past its limit and is silent just inside it', ({ code, severity, tripped, quiet }) => {
    const check = checksOf(tripped).find((item) => item.code === code);
    expect(check).toMatchObject({ code, severity });
    // The figures that tripped it, and what to do.
    if (code !== 'reactive') expect(check!.detail).toMatch(/\d/);
    expect(check!.remedy.length).toBeGreaterThan(10);
    expect(checksOf(quiet).map((item) => item.code)).not.toContain(code);
  });

  it('are all twenty', () => expect(new Set(cases.map(([rule]) => rule)).size).toBe(20));

  it('withhold an answer where one of them stops it', () => {
    const doc = (value: number): EstimateDocument => open({}, { releases: [release(strong)], receptors: to(3_000, { actionValues: [{ value: 1e-6 }] }), ...substance({ densityKgM3: densityFor(sharePast(value), strongPeak) }) });
    expect(solve(doc(0.9), { preview: true }).result.receptors[0]!.verdict).toBe('may exceed');
    const [answer] = solve(doc(1.1), { preview: true }).result.receptors;
    expect(answer!.verdict).toBe('cannot be estimated');
    expect(answer!.reason).toContain("g'h/U²");
    expect(answer!.answers[0]!.arrivalS.likely).toBeNull();
  });

  it('withhold every answer and hatch every frame where the whole run is stopped', () => {
    const { result, messages } = solve(open({}, { conditions: { stratification: { densityStepKgM3: 2, layerDepthM: 2 } }, receptors: to(3_000, { actionValues: [{ value: 1e-6 }] }) }), { preview: true });
    expect(result.receptors[0]!.verdict).toBe('cannot be estimated');
    const frames = messages.filter(({ head }) => head.type === 'frame' || head.type === 'envelope');
    for (const { payload } of frames) expect([...new Uint16Array(payload.buffer, payload.byteOffset, payload.byteLength / 2)].every((code) => code === NO_ESTIMATE)).toBe(true);
  });

  it.each([
    ['open water', open({}, { horizonS: 3_600, receptors: [] })],
    ['a river', river(5_000, { horizonS: 3_600 })],
  ])('hatch the near field of the release in %s and nothing else', (_water, doc) => {
    const { messages } = solve(doc, { preview: true });
    const envelope = messages.find(({ head }) => head.type === 'envelope')!;
    const codes = new Uint16Array(envelope.payload.buffer, envelope.payload.byteOffset, envelope.payload.byteLength / 2);
    const { head } = envelope;
    if (head.type !== 'envelope') throw new Error('no envelope');
    const away: number[] = [];
    if (head.grid.kind === 'plane') {
      const { grid } = head;
      for (let j = 0; j < grid.ny; j++) for (let i = 0; i < grid.nx; i++) away.push(Math.hypot(grid.x0M + i * grid.dxM, grid.y0M + j * grid.dyM) / 50);
    } else for (const part of head.grid.parts) for (const km of part.chainageKm) for (let k = 0; k < part.nAcross; k++) away.push((500 - km) / 0.015);
    expect(away.some((share) => share < 1)).toBe(true);
    away.forEach((share, i) => expect(codes[i] === NO_ESTIMATE).toBe(share < 1));
  });
});

describe('lengths of a jet', () => {
  it('follow from its momentum and buoyancy: 0.5 m3/s at 4 m/s, 998 into 1,025 kg/m3, current 0.3 m/s', () => {
    // Worked by hand: M = 2 m4/s2, g' = 0.258410 m/s2, B = 0.129205 m4/s3.
    const lengths = jetLengths({ flowM3s: 0.5, speedMps: 4, densityKgM3: 998 }, 1_025, 0.3);
    expectClose(lengths.openingM, 0.5 / Math.SQRT2, 1e-12);
    expectClose(lengths.bendingM, Math.SQRT2 / 0.3, 1e-12);
    expectClose(lengths.plumeM, 2 ** 0.75 / Math.sqrt(0.12920488), 1e-6);
    expectClose(lengths.buoyantM, 0.12920488 / 0.027, 1e-6);
  });
});
