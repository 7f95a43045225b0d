import { rateFromHalfLife } from '../../../../shared/units';
import type { WrittenItem } from './seed-item';

type Substance = WrittenItem<'substances'>['data'];
type Value = NonNullable<Substance['publishedValues']>[number];

const EU_DRINKING = 'Directive 98/83/EC Annex I (repealed by (EU) 2020/2184, which keeps most values: check)';
const US_DRINKING = 'US EPA National Primary Drinking Water Regulations, maximum contaminant level';
const EU_SURFACE = 'Directive 2008/105/EC Annex I, inland surface waters';
const US_AQUATIC = 'US EPA National Recommended Water Quality Criteria, aquatic life';
const WHO_1998 = 'WHO Guidelines for Drinking-water Quality, 2nd ed. 1996/98';
const MEMORY = '(from memory)';
const ACUTE = 'acute, 1 h mean';
const CHRONIC = 'chronic, 4 d mean';
const SDS = 'CAS and UN numbers from memory. The safety data sheet of the actual product overrides this entry.';

const value = (use: Value['use'], figure: number, unit: Value['unit'], basis: string, averaging: string, source: string): Value => ({ use, value: figure, unit, basis, averaging, source });
const entry = (id: string, code: string, name: string, lastCheckedOn: string | null, data: Substance): WrittenItem<'substances'> => ({ id, code, name, ownerName: 'Water quality desk', lastCheckedOn, data: { sheetSource: SDS, ...data } });

const ammoniaValues = [
  value('drinking', 0.39, 'mg/l', 'as N', 'indicator', `EU indicator parameter 0.50 mg/l as NH4 ${MEMORY}; 0.39 as N reckoned`),
  value('drinking', 1.5, 'mg/l', 'as N', 'odour', `WHO Guidelines, aesthetic ${MEMORY}`),
  value('aquatic', 17, 'mg/l', 'total, as N, pH 7, 20 C', 'acute, 1 h mean', 'US EPA 2013 ammonia criteria, fresh water'),
  value('aquatic', 1.9, 'mg/l', 'total, as N, pH 7, 20 C', 'chronic, 30 d mean', 'US EPA 2013 ammonia criteria, fresh water'),
  value('aquatic', 3.9, 'mg/l', 'total, as N, pH 8, 20 C', 'acute, 1 h mean', 'US EPA 2013 ammonia criteria, fresh water'),
  value('aquatic', 0.78, 'mg/l', 'total, as N, pH 8, 20 C', 'chronic, 30 d mean', 'US EPA 2013 ammonia criteria, fresh water'),
];

export const substances: WrittenItem<'substances'>[] = [
  entry('ammonia-solution', 'NH3', 'Ammonia solution 25 %', '2026-06-01', {
    otherNames: ['Aqueous ammonia', 'Ammonium hydroxide'], cas: '1336-21-6', unNumber: '2672', basis: 'as N', measure: 'mass', form: 'Solution, 25 % NH3 by mass',
    // 0.25 kg NH3 per kg times 14.007/17.031 kg N per kg NH3.
    activeFraction: 0.2056, productDensityKgM3: 908,
    hazards: 'Corrosive. Gives off toxic, choking gas: keep upwind. Very toxic to aquatic life; the toxic share rises with pH and temperature. Mixes with water at any ratio.',
    publishedValues: ammoniaValues,
    note: 'Figures are total ammonia as nitrogen. Values as NH4 are 1.29 times as large. Nitrified in days, slower when cold: reckoned as lasting.',
  }),
  entry('sodium-hypochlorite', 'NaOCl', 'Sodium hypochlorite 12 %', '2026-06-01', {
    otherNames: ['Chlorine bleach'], cas: '7681-52-9', unNumber: '1791', basis: 'as free Cl2', measure: 'mass', form: 'Solution, 120 g/l as chlorine',
    activeFraction: 0.0992, productDensityKgM3: 1_210,
    loss: { kind: 'first-order', ratePerS: rateFromHalfLife(1_800), source: 'Chlorine demand, half-life 0.5 h: invented for the demonstration. In truth set by what is in the water; leave out when in doubt' },
    hazards: 'Corrosive. Gives off chlorine with acids: never mix. Very toxic to aquatic life.',
    publishedValues: [
      value('drinking', 5, 'mg/l', 'as free Cl2', '', `WHO Guidelines ${MEMORY}`),
      value('drinking', 4, 'mg/l', 'as free Cl2', 'running annual mean', 'US EPA National Primary Drinking Water Regulations, maximum residual disinfectant level'),
      value('aquatic', 19, 'ug/l', 'total residual, fresh water', ACUTE, US_AQUATIC),
      value('aquatic', 11, 'ug/l', 'total residual, fresh water', CHRONIC, US_AQUATIC),
      value('aquatic', 13, 'ug/l', 'sea water', ACUTE, US_AQUATIC),
      value('aquatic', 7.5, 'ug/l', 'sea water', CHRONIC, US_AQUATIC),
    ],
  }),
  entry('chlorpyrifos', 'CPF', 'Chlorpyrifos', '2026-06-01', {
    cas: '2921-88-2', basis: 'active substance', measure: 'mass', form: 'Active substance in fire-water',
    hazards: 'Nerve poison through skin and mouth. Extremely toxic to fish and water insects. Binds to sediment.',
    publishedValues: [
      value('drinking', 0.1, 'ug/l', 'each pesticide', '', EU_DRINKING),
      value('aquatic', 0.03, 'ug/l', '', 'annual mean', EU_SURFACE),
      value('aquatic', 0.1, 'ug/l', '', 'greatest allowed', EU_SURFACE),
      value('aquatic', 0.083, 'ug/l', 'fresh water', ACUTE, US_AQUATIC),
      value('aquatic', 0.041, 'ug/l', 'fresh water', CHRONIC, US_AQUATIC),
      value('aquatic', 0.011, 'ug/l', 'sea water', ACUTE, US_AQUATIC),
      value('aquatic', 0.0056, 'ug/l', 'sea water', CHRONIC, US_AQUATIC),
    ],
    note: 'Density, solubility and half-life not confirmed: left empty.',
  }),
  entry('chromium-vi', 'CRVI', 'Chromium(VI), plating bath', '2026-06-01', {
    otherNames: ['Chromic acid', 'Hexavalent chromium'], cas: '18540-29-9', basis: 'as Cr', measure: 'mass', form: 'Plating bath, 150 g/l Cr(VI) (invented)',
    hazards: 'Toxic, corrosive, causes cancer; no skin contact. Does not degrade; turns to chromium(III) in water without oxygen.',
    publishedValues: [
      value('drinking', 50, 'ug/l', 'total Cr', '', `${EU_DRINKING}; 25 later ${MEMORY}`),
      value('drinking', 50, 'ug/l', 'total Cr, provisional', '', WHO_1998),
      value('drinking', 100, 'ug/l', 'total Cr', '', US_DRINKING),
      value('aquatic', 16, 'ug/l', 'Cr(VI) dissolved, fresh water', ACUTE, US_AQUATIC),
      value('aquatic', 11, 'ug/l', 'Cr(VI) dissolved, fresh water', CHRONIC, US_AQUATIC),
      value('aquatic', 1_100, 'ug/l', 'Cr(VI) dissolved, sea water', ACUTE, US_AQUATIC),
      value('aquatic', 50, 'ug/l', 'Cr(VI) dissolved, sea water', CHRONIC, US_AQUATIC),
    ],
  }),
  entry('benzene', 'BENZ', 'Benzene, dissolved from petrol', '2026-06-01', {
    otherNames: ['Petrol, water-soluble part'], cas: '71-43-2', unNumber: '1114', basis: 'dissolved', measure: 'mass', form: 'Dissolved share of floating petrol: an engineer\u2019s estimate',
    productDensityKgM3: 876.52, solubilityKgM3: 1.78,
    loss: { kind: 'first-order', ratePerS: rateFromHalfLife(5 * 3_600), source: 'Evaporation half-life 5 h, range 3 h to none: invented for the demonstration lake' },
    hazards: 'Highly flammable, vapour explosive over water: no ignition. Causes cancer.',
    publishedValues: [
      value('drinking', 1, 'ug/l', '', '', EU_DRINKING),
      value('drinking', 5, 'ug/l', '', '', US_DRINKING),
      value('drinking', 10, 'ug/l', '', 'lifetime', WHO_1998),
      value('drinking', 200, 'ug/l', '', 'child, 1 to 10 days, advisory', 'US EPA health advisories 1988 (marked draft)'),
      value('aquatic', 10, 'ug/l', '', 'annual mean', EU_SURFACE),
      value('aquatic', 50, 'ug/l', '', 'greatest allowed', EU_SURFACE),
    ],
    note: 'Density after the CRC Handbook. Solubility 1,780 mg/l for pure benzene; from petrol far less dissolves. The floating part moves otherwise and is not reckoned.',
  }),
  entry('digester-ammonia', 'DIG-N', 'Digester slurry, ammonia nitrogen', '2026-06-01', {
    otherNames: ['Digestate'], basis: 'as N', measure: 'mass', form: 'Slurry, 3 kg/m3 ammonia nitrogen (invented)', productDensityKgM3: 1_000, activeFraction: 0.003,
    hazards: 'Gives off ammonia and hydrogen sulfide in closed spaces. Takes oxygen from the water. Carries faecal organisms.',
    publishedValues: ammoniaValues,
    sheetSource: 'Strength and density invented for the demonstration.',
  }),
  entry('e-coli', 'ECOLI', 'Escherichia coli', '2026-06-01', {
    basis: 'cfu', measure: 'count', form: 'Faecal indicator organisms in sewage or slurry',
    loss: { kind: 'day-night', dayRatePerS: Math.LN10 / (4 * 3_600), nightRatePerS: Math.LN10 / (20 * 3_600), sunriseHour: 6, sunsetHour: 18, source: 'T90 of 4 h by day and 20 h by night: invented for the demonstration; longer in cold water' },
    hazards: 'Shows faecal matter: infection by swallowing or through wounds.',
    publishedValues: [
      value('bathing', 500, 'counts/100ml', 'inland, excellent', '95th percentile', 'Directive 2006/7/EC Annex I'),
      value('bathing', 1_000, 'counts/100ml', 'inland, good', '95th percentile', 'Directive 2006/7/EC Annex I'),
      value('bathing', 900, 'counts/100ml', 'inland, sufficient', '90th percentile', 'Directive 2006/7/EC Annex I'),
      value('bathing', 250, 'counts/100ml', 'coastal, excellent', '95th percentile', 'Directive 2006/7/EC Annex I'),
      value('bathing', 500, 'counts/100ml', 'coastal, good', '95th percentile', 'Directive 2006/7/EC Annex I'),
      value('bathing', 500, 'counts/100ml', 'coastal, sufficient', '90th percentile', 'Directive 2006/7/EC Annex I'),
    ],
    sheetSource: 'Organisms are counted, not weighed: colony-forming units.',
    note: 'The classes are percentiles over seasons, used here as levels for a short event.',
  }),
  entry('copper-sulfate', 'CUSO4', 'Copper sulfate pentahydrate', '2026-06-01', {
    otherNames: ['Blue vitriol', 'CuSO4.5H2O'], cas: '7758-99-8', unNumber: '3077', basis: 'as Cu, dissolved', measure: 'mass', form: 'Crystals in bags',
    // Molar mass 63.546 of 249.677.
    activeFraction: 0.2545, productDensityKgM3: 2_286, solubilityKgM3: 320,
    hazards: 'Harmful if swallowed, injures the eyes. Very toxic to aquatic life, lasting.',
    publishedValues: [
      value('drinking', 2_000, 'ug/l', 'as Cu', '', EU_DRINKING),
      value('drinking', 2_000, 'ug/l', 'as Cu', '', WHO_1998),
      value('drinking', 1_300, 'ug/l', 'as Cu', 'action level at the tap', 'US EPA National Primary Drinking Water Regulations'),
      value('aquatic', 4.8, 'ug/l', 'dissolved, sea water', ACUTE, US_AQUATIC),
      value('aquatic', 3.1, 'ug/l', 'dissolved, sea water', CHRONIC, US_AQUATIC),
    ],
    note: 'Density after the CRC Handbook; solubility from memory, of the pentahydrate. Fresh-water criteria depend on water chemistry and are left empty.',
  }),
  entry('pfas-20', 'PFAS', 'PFAS, sum of 20', '2026-06-01', {
    basis: 'sum of 20', measure: 'mass', form: 'Fire-fighting foam in run-off, 15 mg/l (invented)',
    hazards: 'Lasting; builds up in people and animals. No sharp taste or smell warns.',
    publishedValues: [value('drinking', 0.1, 'ug/l', 'sum of 20', '', `Directive (EU) 2020/2184 Annex I ${MEMORY}`)],
  }),
  entry('mcpa', 'MCPA', 'MCPA', '2025-02-10', {
    otherNames: ['4-chloro-2-methylphenoxyacetic acid'], cas: '94-74-6', basis: 'acid', measure: 'mass', form: 'Herbicide in bulk',
    hazards: 'Harmful if swallowed, injures the eyes. Very toxic to water plants.',
    publishedValues: [value('drinking', 0.1, 'ug/l', 'each pesticide', '', EU_DRINKING)],
    note: 'Density, solubility and half-life not confirmed: left empty.',
  }),
  entry('phenol', 'PHEN', 'Phenol', '2026-06-01', {
    otherNames: ['Carbolic acid'], cas: '108-95-2', unNumber: '2312', basis: '', measure: 'mass', form: 'Molten, in a tank container', productDensityKgM3: 1_054.5, solubilityKgM3: 82,
    hazards: 'Toxic through skin, mouth and vapour; burns without pain at first. Tastes of medicine when water is chlorinated.',
    publishedValues: [
      value('drinking', 1, 'ug/l', '', 'taste after chlorination', 'Historic limit against chlorophenol taste; no bearing on toxicity'),
      value('shellfish', 300, 'ug/l', '', 'taint', `Taint of fish and shellfish ${MEMORY}`),
    ],
    note: 'Density of the liquid after the CRC Handbook; solubility 82,000 mg/l at 15 C. Readily biodegradable in under 10 days: not reckoned over the hours of an estimate.',
  }),
];
