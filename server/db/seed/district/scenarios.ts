import { coastScenarios } from './scenarios-coast';
import { copperInBasin, foamAtQuay, stormOverflows } from './scenarios-harbour';
import { lakeScenarios } from './scenarios-lake';
import type { SeedIncident } from './scenarios-parts';
import { bargeHatch, hypochloriteLeak, orchardFires, platingBath, tankerAtBridge } from './scenarios-river';

export type { SeedIncident, SeedScenario } from './scenarios-parts';

/** Incidents of the demonstration with their scenarios, ready to be saved as revisions. */
export const districtIncidents: SeedIncident[] = [
  {
    name: 'Tanker at V2 bridge', marking: 'EXERCISE', utcOffset: '-08:00',
    summary: 'Table-top exercise. Road tanker through the rail of the V2 bridge, ammonia solution running into the Ollemar at the right bank.',
    startedMinutesAgo: 40,
    scenarios: [tankerAtBridge('S01-E', 'As reported, 4 t in 10 minutes', 'First figures from the driver')],
  },
  {
    name: 'Library of the district', marking: 'PLANNING', utcOffset: '-08:00',
    summary: 'Releases reckoned beforehand for the contingency plan: each main source at the flow, tide or wind that matters. Take the nearest one and change what is different.',
    scenarios: [
      tankerAtBridge('S01', 'Tanker on the V2 bridge, ammonia solution 25 %, usual flow', 'Three receptors down one river; figures as nitrogen; the first intake has ten hours of storage.'),
      hypochloriteLeak,
      ...orchardFires,
      platingBath,
      ...lakeScenarios,
      copperInBasin,
      foamAtQuay,
      bargeHatch,
      ...stormOverflows,
      ...coastScenarios,
    ],
  },
];
