import type { Marking } from '../../../shared/schemas/incidents';
import type { Choice } from '../../components/inputs';

export const markingChoices: readonly Choice<Marking>[] = [
  { value: 'REAL', label: 'REAL', hint: 'it has happened' },
  { value: 'EXERCISE', label: 'EXERCISE', hint: 'it is being practised' },
  { value: 'PLANNING', label: 'PLANNING', hint: 'it is thought through' },
];
