import type { RegisterName } from '../../../../shared/schemas/registers';

export type RegisterWords = { title: string; one: string; about: string; add: string; emptyTitle: string; emptyText: string };

export const registerWords: Record<RegisterName, RegisterWords> = {
  waters: {
    title: 'Waters', one: 'water', add: 'Add water',
    about: 'Rivers as reaches with their hydraulics at named flows; lakes, harbours, estuaries and coasts as areas.',
    emptyTitle: 'No waters yet',
    emptyText: 'A forecast needs the water it runs in. Add the river or lake you answer for: its line or outline, depth, and flow or current.',
  },
  receptors: {
    title: 'Receptors', one: 'receptor', add: 'Add receptor',
    about: 'Places that may be harmed: intakes, beaches, farms, habitats. Whom to call, how long closing takes, and at which value they act.',
    emptyTitle: 'No receptors yet',
    emptyText: 'Add each intake, beach or farm with its place on the water, its contact and its action values. Forecasts then say when each is reached.',
  },
  sources: {
    title: 'Sources', one: 'source', add: 'Add source',
    about: 'Sites, bridges, outfalls and berths from which a release may come, with the largest credible quantity of each substance.',
    emptyTitle: 'No sources yet',
    emptyText: 'Add the sites you plan for. A release can then be placed at a source with one press.',
  },
  substances: {
    title: 'Substances', one: 'substance', add: 'Add substance',
    about: 'What may be released: identity, basis, properties, loss, hazards, and published values each with its source.',
    emptyTitle: 'No substances yet',
    emptyText: 'Add the substances your sources hold, each with the values you would be asked about.',
  },
  stations: {
    title: 'Stations', one: 'station', add: 'Add station',
    about: 'Gauges and sampling points: where flow is read and samples are taken.',
    emptyTitle: 'No stations yet',
    emptyText: 'Add the gauges you read the flow from and the places where crews can take samples.',
  },
};

export const kindWords: Record<string, string> = {
  river: 'River', lake: 'Lake', harbour: 'Harbour', estuary: 'Estuary', coast: 'Coast',
  intake: 'Drinking-water intake', bathing: 'Bathing water', irrigation: 'Irrigation', industry: 'Industry', hatchery: 'Hatchery', 'fish-farm': 'Fish farm', shellfish: 'Shellfish water', ecological: 'Ecological site', other: 'Other',
  site: 'Site', tank: 'Tank', bridge: 'Bridge', outfall: 'Outfall', berth: 'Berth', pipeline: 'Pipeline', store: 'Store',
  gauge: 'Flow gauge', 'sampling-point': 'Sampling point', 'tide-gauge': 'Tide gauge', 'current-meter': 'Current meter', weather: 'Weather station',
};

export const bankWords: Record<string, string> = { left: 'left bank', right: 'right bank', mid: 'mid-channel' };
export const useWords: Record<string, string> = { drinking: 'Drinking water', bathing: 'Bathing', irrigation: 'Irrigation', livestock: 'Livestock', aquatic: 'Aquatic life', shellfish: 'Shellfish', other: 'Other' };

export const wordOf = (words: Record<string, string>, key: unknown): string => words[String(key)] ?? String(key);
export const choicesOf = (words: Record<string, string>, keys: readonly string[]): { value: string; label: string }[] => keys.map((value) => ({ value, label: wordOf(words, value) }));
