import type { SubstanceData } from '../../../../shared/schemas/registers';
import type { DraftAmount, DraftRange } from './draft';

export type AmountHow = DraftAmount['how'];
export const amountForms: { how: AmountHow; words: string; measure: 'mass' | 'count' | 'either' }[] = [
  { how: 'mass', words: 'Mass', measure: 'mass' },
  { how: 'volume-strength', words: 'Volume and strength', measure: 'mass' },
  { how: 'volume-density', words: 'Volume and density', measure: 'mass' },
  { how: 'count', words: 'Number of organisms', measure: 'count' },
  { how: 'volume-count', words: 'Volume and number per volume', measure: 'count' },
  { how: 'unknown', words: 'Not known', measure: 'either' },
];

export const formsFor = (measure: 'mass' | 'count') => amountForms.filter((form) => form.measure === 'either' || form.measure === measure);

const noRange: DraftRange = { low: null, likely: null, high: null };

/** The same spill told another way: what both ways share is kept, the rest comes from the substance's entry. */
export function changeForm(amount: DraftAmount, how: AmountHow, substance: SubstanceData | null): DraftAmount {
  const volumeM3 = 'volumeM3' in amount ? amount.volumeM3 : { ...noRange };
  const activeFraction = substance?.activeFraction ?? ('activeFraction' in amount ? amount.activeFraction : 1);
  switch (how) {
    case 'mass':
      return { how, massKg: { ...noRange }, activeFraction };
    case 'volume-strength':
      return { how, volumeM3, strengthKgM3: null };
    case 'volume-density':
      return { how, volumeM3, densityKgM3: substance?.productDensityKgM3 ?? null, activeFraction };
    case 'count':
      return { how, count: { ...noRange } };
    case 'volume-count':
      return { how, volumeM3, countPerM3: null };
    case 'unknown':
      return { how, standIn: null };
  }
}

/** After another substance was chosen: the form stays where it can, fractions and densities become the new ones. */
export function amountForSubstance(amount: DraftAmount, substance: SubstanceData): DraftAmount {
  const fits = formsFor(substance.measure).some((form) => form.how === amount.how);
  if (!fits) return changeForm(amount, substance.measure === 'count' ? 'count' : 'mass', substance);
  if (amount.how === 'mass') return { ...amount, activeFraction: substance.activeFraction };
  if (amount.how === 'volume-density') return { ...amount, activeFraction: substance.activeFraction, densityKgM3: substance.productDensityKgM3 ?? amount.densityKgM3 };
  return amount;
}
