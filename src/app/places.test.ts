import { describe, expect, it } from 'vitest';
import { homeOf, incidentPlaces, isAt, officePlaces, openTo } from './places';

describe('places', () => {
  it('begin with the Watch for those who may see incidents, and elsewhere for an administrator', () => {
    expect(homeOf(['planner'])).toBe('/');
    expect(homeOf(['coordinator'])).toBe('/');
    expect(homeOf(['administrator'])).toBe('/office/people');
    expect(homeOf(['administrator', 'engineer'])).toBe('/');
  });

  it('are shown only to those who may use them', () => {
    expect(openTo(officePlaces, ['planner'])).toEqual([]);
    expect(openTo(officePlaces, ['supervisor']).map(({ label }) => label)).toEqual(['People', 'Audit trail']);
  });

  it('hold what stands below them, and the Watch holds only itself', () => {
    const [watch, incidents] = incidentPlaces;
    expect(isAt(watch!, '/incidents')).toBe(false);
    expect(isAt(incidents!, '/incidents/i1')).toBe(true);
    expect(isAt(incidents!, '/incidents-of-old')).toBe(false);
  });
});
