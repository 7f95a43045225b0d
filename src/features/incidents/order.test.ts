import { describe, expect, it } from 'vitest';
import type { Incident, NextArrival } from '../../../shared/schemas/incidents';
import { countdownTo, isFarOff } from './countdown';
import { byUrgency, matches } from './order';

const arrival = (earliestAt: string): NextArrival => ({ incidentId: 'i', scenarioId: 's', scenarioName: 'Whole tank', runId: 'r', receptorCode: 'INT-1', receptorName: 'Upper intake', verdict: 'may exceed', earliestAt, likelyAt: null, closeByAt: null });
const buildIncident = (parts: Partial<Incident>): Incident => ({
  id: 'i',
  number: '2031-001',
  name: 'Tanker at V2 bridge',
  marking: 'REAL',
  state: 'open',
  summary: '',
  utcOffset: '-08:00',
  openedAt: '2031-05-12T06:40:00-08:00',
  openedBy: 'Edda Rook',
  closedAt: null,
  version: 1,
  scenarioCount: 0,
  nextArrivals: [],
  abilities: { update: true, close: true, addScenario: true, log: true },
  ...parts,
});

describe('the Watch', () => {
  it('puts what is real before exercises and plans, however near their arrivals are', () => {
    const plan = buildIncident({ id: 'plan', marking: 'PLANNING', nextArrivals: [arrival('2031-05-12T07:00:00-08:00')] });
    const exercise = buildIncident({ id: 'exercise', marking: 'EXERCISE' });
    const real = buildIncident({ id: 'real', nextArrivals: [arrival('2031-05-13T07:00:00-08:00')] });
    expect([plan, exercise, real].sort(byUrgency).map(({ id }) => id)).toEqual(['real', 'exercise', 'plan']);
  });

  it('puts the nearest arrival first, compares instants and not their texts, and leaves those without any to the end', () => {
    const later = buildIncident({ id: 'later', nextArrivals: [arrival('2031-05-12T09:00:00-08:00')] });
    const sooner = buildIncident({ id: 'sooner', nextArrivals: [arrival('2031-05-12T16:30:00Z')] });
    const none = buildIncident({ id: 'none' });
    expect([none, later, sooner].sort(byUrgency).map(({ id }) => id)).toEqual(['sooner', 'later', 'none']);
  });

  it('counts down in minutes, hours or days and never says more time than there is', () => {
    expect(countdownTo(8_159_000, 0)).toEqual({ text: '2 h 15 min', isPast: false });
    expect(countdownTo(175_900_000, 0)).toEqual({ text: '2 d', isPast: false });
    expect(countdownTo(1_000_000_000, 0)).toEqual({ text: '11 d', isPast: false });
    expect(countdownTo(59_000, 0)).toEqual({ text: 'under 1 min', isPast: false });
    expect(countdownTo(0, 30_000)).toEqual({ text: 'now', isPast: true });
    expect(countdownTo(0, 1_259_000)).toEqual({ text: '20 min', isPast: true });
  });

  it('counts down to nothing that is more than thirty days off: plans lie at dates that were made up', () => {
    const day = 86_400_000;
    expect([29 * day, 31 * day, -40 * day].map((ms) => isFarOff(ms, 0))).toEqual([false, true, false]);
  });
});

describe('the search of incidents', () => {
  it('wants every word somewhere, in any order and any case', () => {
    const incident = buildIncident({});
    expect(matches(incident, 'bridge TANKER')).toBe(true);
    expect(matches(incident, '2031-001 real')).toBe(true);
    expect(matches(incident, 'tanker lake')).toBe(false);
    expect(matches(incident, '')).toBe(true);
  });
});
