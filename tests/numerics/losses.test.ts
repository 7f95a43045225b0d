import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { EstimateDocumentInput } from '../../shared/schemas/estimate';
import { SolverInputError } from '../../server/solver/errors';
import { airWaterRatio, henryAt } from '../../server/solver/losses/henry';
import { ammoniumPka, unionisedAcid, unionisedAmmonia } from '../../server/solver/losses/ionisation';
import { lossParts } from '../../server/solver/losses/loss-parts';
import { filmsOf, processRate } from '../../server/solver/losses/process-rate';
import { fergusonChurchMps, stokesMps } from '../../server/solver/losses/settling';
import { dissolvedFraction, kdFromKoc, kocFromKow } from '../../server/solver/losses/sorption';
import { rateAtTemperature, THETA } from '../../server/solver/losses/temperature';
import { currentFilmMps, currentLawFor, screeningFilms, twoFilmMps, windFilms, windFrictionMps } from '../../server/solver/losses/transfer-velocity';
import { lossProcessSchema, type LossProcess, type Volatilisation } from '../../shared/schemas/losses';
import { expectClose } from './close-to';
import { openDocument, receptor, release, riverDocument, reachOf, solve, at } from './documents';

const HOUR = 3_600;
const DAY = 86_400;

describe('temperature', () => {
  it('slows oxygen demand to 0.63173 of its rate at 10 °C and quickens re-aeration to 1.26765 at 30 °C', () => {
    expectClose(rateAtTemperature(1, THETA.oxygenDemand, 10), 0.63173, 1e-5);
    expectClose(rateAtTemperature(1, THETA.reaeration, 30), 1.26765, 1e-5);
  });

  it("lowers benzene's Henry constant from 588 to 360.6 Pa m3/mol at 15 °C, H' 0.1505 (published 0.152, US EPA on-line tools)", () => {
    const henry = henryAt(588, 4_200, 15);
    expectClose(henry, 360.6, 2e-4);
    expectClose(airWaterRatio(henry, 15), 0.1505, 2e-4);
    expectClose(airWaterRatio(henry, 15), 0.152, 0.015);
  });
});

/** Half-lives in the usual model river and lake, as printed in the Hazardous Substances Data Bank (US National Library of Medicine) after Lyman et al. 1982. */
const published = [
  { name: 'toluene', henryAtm: 6.64e-3, molar: 92.141, riverH: 2.932, riverPrinted: 2.9, lakeD: 3.838, lakePrinted: 3.8 },
  { name: 'chloroform', henryAtm: 3.67e-3, molar: 119.369, riverH: 3.454, riverPrinted: 3.5, lakeD: 4.404, lakePrinted: 4.4 },
  { name: 'acrylonitrile', henryAtm: 1.38e-4, molar: 53.064, riverH: 6.766, riverPrinted: 7, lakeD: 4.288, lakePrinted: 4 },
  { name: 'benzonitrile', henryAtm: 5.21e-5, molar: 103.124, riverH: 20.09, riverPrinted: 20, lakeD: 9.208, lakePrinted: 9 },
];

describe('volatilisation', () => {
  const halfLifeS = (henryAtm: number, molar: number, windMps: number, speedMps: number): number =>
    (Math.LN2 * 1) / twoFilmMps(screeningFilms(windMps, speedMps, 1, molar), airWaterRatio(henryAtm * 101_325, 25));

  it.each(published)('of $name from a model river and lake takes the published time', ({ henryAtm, molar, riverH, riverPrinted, lakeD, lakePrinted }) => {
    const river = halfLifeS(henryAtm, molar, 3, 1) / HOUR;
    const lake = halfLifeS(henryAtm, molar, 0.5, 0.05) / DAY;
    // Quoted to four digits from the same formulas; the printed values are rounded to one or two.
    expectClose(river, riverH, 1e-3);
    expectClose(lake, lakeD, 1e-3);
    expectClose(river, riverPrinted, 0.04);
    expectClose(lake, lakePrinted, 0.08);
  });

  it('by wind and current: the independent figures of toluene at 4 m/s over a river of 1.5 m', () => {
    expectClose(windFrictionMps(4), 0.117439346, 1e-8);
    const current = currentFilmMps('oconnor-dobbins', 0.6, 1.5, 9.8e-10);
    const wind = windFilms(4, 9.8e-10, 8e-6);
    const ratio = airWaterRatio(555, 20);
    expectClose(current, 1.979898987e-5, 1e-8);
    expectClose(wind.waterMps, 5.051030409e-6, 1e-8);
    expectClose(wind.airMps, 0.004560776766, 1e-8);
    expectClose(ratio, 0.227703077, 1e-8);
    const velocity = twoFilmMps({ waterMps: current, airMps: wind.airMps }, ratio);
    expectClose(velocity, 1.942858517e-5, 1e-8);
    expectClose((velocity / 1.5) * DAY, 1.119086506, 1e-8);
    expectClose((Math.LN2 * 1.5) / velocity / HOUR, 14.86527829, 1e-8);
  });

  it('grows with the wind without a jump where the surface turns rough', () => {
    let [low, high] = [0, 15];
    while (high - low > 1e-12) {
      const middle = (low + high) / 2;
      if (windFrictionMps(middle) > 0.3) high = middle;
      else low = middle;
    }
    // The two branches are 1.01866e-3 and 1.0230e-3 there: half a per cent.
    expectClose(windFilms(high, 1e-6, 8e-6).waterMps, windFilms(low, 1e-6, 8e-6).waterMps, 5e-3);
  });

  it('by current has a floor in deep slack water and takes the law that fits', () => {
    expectClose(currentFilmMps('oconnor-dobbins', 0.01, 20, 2.09e-9), 0.6 / DAY, 1e-12);
    expect([currentLawFor(0.3, 0.4), currentLawFor(1.2, 1.5), currentLawFor(0.3, 3)]).toEqual(['owens', 'churchill', 'oconnor-dobbins']);
    // Published forms at U 1 m/s, h 1 m: 5.03 and 5.32 a day.
    expectClose(currentFilmMps('churchill', 1, 1, 2.09e-9) * DAY, 5.03, 1e-12);
    expectClose(currentFilmMps('owens', 1, 1, 2.09e-9) * DAY, 5.32, 1e-12);
    expectClose(currentFilmMps('oconnor-dobbins', 1, 1, 2.09e-9) * DAY, 3.93, 6e-3);
  });

  it('is faster for every more volatile substance and never faster than the water film', () =>
    fc.assert(
      fc.property(fc.double({ min: 1e-6, max: 1, noNaN: true }), fc.double({ min: 0, max: 15, noNaN: true }), (ratio, windMps) => {
        const films = windFilms(windMps, 1e-9, 9e-6);
        const velocity = twoFilmMps(films, ratio);
        expect(twoFilmMps(films, 2 * ratio)).toBeGreaterThan(velocity);
        expect(velocity).toBeLessThan(films.waterMps);
      }),
    ));
});

describe('sorption and settling', () => {
  it('dissolves 0.9524 at Kd 1000 L/kg and 50 mg/L', () => expectClose(dissolvedFraction(1, 0.05), 1 / 1.05, 1e-12));

  it.each([
    // log Kow and measured Koc, L/kg: US EPA 1996, Soil Screening Guidance, table 39. The regression holds within a factor of 1.8.
    ['chloroform', 1.97, 52.5],
    ['benzene', 2.13, 61.7],
    ['trichloroethylene', 2.53, 94.3],
    ['toluene', 2.73, 140],
    ['p-xylene', 3.15, 311],
  ])('estimates Koc of %s', (_name, logKow, measured) => {
    const ratio = (kocFromKow(logKow) * 1_000) / measured;
    expect(ratio).toBeGreaterThan(1 / 1.8);
    expect(ratio).toBeLessThan(1.8);
  });

  it('takes the organic share of Koc', () => expectClose(kdFromKoc(0.14, 0.02), 0.0028, 1e-12));

  it.each([
    [2e-6, 3.5950317e-6, 3.5957549e-6, 3.597e-6],
    [10e-6, 8.9377902e-5, 8.957821e-5, 8.9925e-5],
    [63e-6, 0.0032541438, 0.0033632345, 0.0035691232],
    [125e-6, 0.011059078, 0.011998017, 0.014050781],
    [250e-6, 0.031840487, 0.037874738, 0.056203125],
    [1e-3, 0.12627837, 0.18459902, 0.89925],
  ])('quartz of %d m sinks as natural grain, sphere and by Stokes', (diameter, natural, sphere, stokes) => {
    expectClose(fergusonChurchMps(diameter, 2_650, 'natural'), natural, 1e-7);
    expectClose(fergusonChurchMps(diameter, 2_650, 'sphere'), sphere, 1e-7);
    expectClose(stokesMps(diameter, 2_650), stokes, 1e-7);
  });
});

describe('un-ionised shares', () => {
  it('pKa of ammonium at 18 °C is 9.4665 (guideline pages print 9.465)', () => expectClose(ammoniumPka(18), 9.46652, 1e-6));

  it.each([
    [18, 7.7, 0.01683112],
    [20, 8, 0.03807126],
    [25, 8, 0.05366234],
    [10, 7, 0.00185253],
  ])('of ammonia at %d °C and pH %d', (temperature, pH, share) => expectClose(unionisedAmmonia(temperature, pH), share, 2e-6));

  it('is half at pH = pKa for an acid and falls above', () => {
    expectClose(unionisedAcid(9.2, 9.2), 0.5, 1e-12);
    expect(unionisedAcid(9.2, 10.2)).toBeLessThan(0.1);
  });
});

const process = (input: unknown): LossProcess => lossProcessSchema.parse(input);
const toluene = (over: Partial<Volatilisation> = {}): LossProcess =>
  process({ kind: 'volatilisation', henryPaM3Mol: 667, henrySlopeK: 4_300, molarMassGMol: 92.141, ...over });

type Rest = Partial<Omit<EstimateDocumentInput, 'water'>>;
const river = (losses: LossProcess[], rest: Rest = {}, loss: NonNullable<EstimateDocumentInput['substance']['loss']> = { kind: 'none' }, applyLoss = true) =>
  riverDocument([reachOf({ id: 'r', lengthKm: 40, Q: 30, W: 40, H: 1.5, U: 0.5, D: 20, e: 0.5 })], {
    horizonS: 60_000,
    substance: { name: 'T', loss, losses, applyLoss },
    releases: [release({ channel: { reachId: 'r', chainageKm: 40, bank: 'mid' } })],
    receptors: [receptor({ position: at(20_000, 0), channel: { reachId: 'r', chainageKm: 20, bank: 'mid' } })],
    conditions: { windSpeedMps: 4, suspendedKgM3: 0.05, temperatureC: 12, pH: 8 },
    ...rest,
  });

describe('the processes of a document', () => {
  it('add their rates to the stated loss, each with a line of working and its source', () => {
    const doc = river([process({ kind: 'decay', ratePerS: 1e-5 }), toluene(), process({ kind: 'flushing', inflowM3s: 2, volumeM3: 1e6 })], {}, { kind: 'first-order', ratePerS: 4e-6 });
    const parts = lossParts(doc);
    expect(parts.map((part) => part.name)).toEqual(['Loss', 'Decay', 'Volatilisation', 'Flushing']);
    const { result } = solve(doc);
    for (const part of parts) {
      const line = result.working.find((item) => item.label === part.name)!;
      expect(line.value).toBe(part.line.value);
      expect(line.formula).not.toBe('');
    }
    const rates = parts.map((part) => part.clock.constantRatePerS!);
    expectClose(rates[1]!, 1e-5 * 1.047 ** -8, 1e-12);
    const plain = solve(river([], {}, { kind: 'first-order', ratePerS: rates.reduce((sum, rate) => sum + rate, 0) })).result;
    expectClose(result.receptors[0]!.peak.likely!, plain.receptors[0]!.peak.likely!, 1e-12);
  });

  it('are only shown beside a conservative estimate', () => {
    const [bare] = solve(river([])).result.receptors;
    const [shown] = solve(river([toluene()], {}, { kind: 'none' }, false)).result.receptors;
    expect(shown!.peak.likely).toBe(bare!.peak.likely);
    expect(shown!.withLosses!.peak).toBeLessThan(0.9 * bare!.peak.likely!);
  });

  it('share the lost amount by their rates', () => {
    const { diagnostics } = solve(river([process({ kind: 'decay', ratePerS: 3e-6, theta: 1 }), process({ kind: 'flushing', inflowM3s: 1, volumeM3: 1e6 })])).result;
    const [decay, flushing] = diagnostics.lostBy!;
    expectClose(decay!.amount / flushing!.amount, 3, 1e-12);
    expectClose(decay!.amount + flushing!.amount, diagnostics.massLost, 1e-12);
  });

  it('share it by day and night as a fine sum over the release does', () => {
    const day = process({ kind: 'day-night', dayRatePerS: 5e-5, nightRatePerS: 1e-6, sunriseHour: 8, sunsetHour: 16 });
    const doc = river([day, process({ kind: 'decay', ratePerS: 1e-5, theta: 1 })], { releases: [release({ channel: { reachId: 'r', chainageKm: 40, bank: 'mid' }, timing: { kind: 'steady', durationS: 20_000 } })] });
    const [first, second] = solve(doc).result.diagnostics.lostBy!;
    // Rates and sunrise as above; T0 is 06:40 local time.
    const rate = (t: number): number => (((t + 6 * HOUR + 40 * 60) % DAY) >= 8 * HOUR && ((t + 6 * HOUR + 40 * 60) % DAY) < 16 * HOUR ? 5e-5 : 1e-6);
    let [byDay, byDecay] = [0, 0];
    const step = 20;
    for (let born = 50; born < 20_000; born += 100)
      for (let t = born + step / 2, left = 1; t < 60_000; t += step) {
        const gone = left * -Math.expm1(-(rate(t) + 1e-5) * step);
        left -= gone;
        byDay += (gone * rate(t)) / (rate(t) + 1e-5);
        byDecay += (gone * 1e-5) / (rate(t) + 1e-5);
      }
    // The fine sum meets sunrise and sunset within half a step of 20 s.
    expectClose(first!.amount / second!.amount, byDay / byDecay, 2e-3);
  });

  it('let only the un-ionised share of ammonia leave', () => {
    const doc = river([process({ kind: 'volatilisation', henryPaM3Mol: 1.6, molarMassGMol: 17.031, ionisation: { kind: 'ammonia' } }), process({ kind: 'volatilisation', henryPaM3Mol: 1.6, molarMassGMol: 17.031 })]);
    const [ionised, whole] = lossParts(doc);
    expectClose(ionised!.clock.constantRatePerS! / whole!.clock.constantRatePerS!, unionisedAmmonia(12, 8), 1e-12);
  });

  it('stop at the surface under ice', () => {
    const [iced] = lossParts(river([toluene()], { conditions: { windSpeedMps: 4, ice: true } }));
    expect(iced!.clock.constantRatePerS).toBe(0);
  });

  it('sink the sorbed share with its particles: (1 - f) w/h', () => {
    const doc = river([process({ kind: 'settling', partition: { kind: 'kd', kdM3Kg: 1 }, particles: { kind: 'speed', settlingMps: 1e-4 } })]);
    expectClose(lossParts(doc)[0]!.clock.constantRatePerS!, ((1 - 1 / 1.05) * 1e-4) / 1.5, 1e-12);
  });

  it('take the stronger of wind and current, and in open water the wind that drives it', () => {
    const doc = openDocument({ current: [{ kind: 'wind', windSpeedMps: 14, windFromDeg: 270, driftFraction: 0.02 }] }, { substance: { name: 'T', losses: [toluene()] } });
    const water = { depthM: 5, speedMps: 0.28, temperatureC: 20, windMps: 14, pH: null, suspendedKgM3: null, isIced: false, how: '' };
    const volatile = toluene() as Volatilisation;
    expect(filmsOf(volatile, water).how).toContain('both films by the wind');
    expect(filmsOf(volatile, { ...water, windMps: 1, speedMps: 1, depthM: 1 }).how).toContain('by the current');
    expectClose(lossParts(doc)[0]!.clock.constantRatePerS!, processRate(volatile as Extract<LossProcess, { kind: 'volatilisation' }>, water).ratePerS, 1e-12);
  });

  it.each([
    ['conditions.windSpeedMps', [toluene()], {}],
    ['conditions.pH', [toluene({ ionisation: { kind: 'base', pKa: 9 } })], { windSpeedMps: 3 }],
    ['conditions.suspendedKgM3', [process({ kind: 'settling', partition: { kind: 'kd', kdM3Kg: 1 }, particles: { kind: 'speed', settlingMps: 1e-4 } })], {}],
  ])('are refused without %s', (path, losses, conditions) => {
    expect(() => solve(river(losses, { conditions }))).toThrow(SolverInputError);
    try {
      solve(river(losses, { conditions }));
    } catch (error) {
      expect((error as SolverInputError).errors[0]!.path).toBe(path);
    }
  });
});
