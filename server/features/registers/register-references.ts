import { referenceProblems, type RuleProblem, type SubstanceRef, type WaterRef } from '../../../shared/register-rules';
import type { ReceptorData, RegisterData, RegisterName, SourceData, StationData } from '../../../shared/schemas/registers';
import type { FieldError } from '../../../shared/problem';
import type { RegisterItemRow } from '../../db/entities/register.entities';
import { AppError } from '../../http/problems';
import type { RegisterRepository } from './register.repository';

type Refs = { waters: Map<string, RegisterItemRow>; substances: Map<string, RegisterItemRow> };
type Written = Pick<RegisterItemRow, 'id' | 'register' | 'name' | 'data'>;

/** Holds every entry to the entries it refers to, and those that refer to it to the change. */
export class RegisterReferences {
  constructor(private readonly repository: RegisterRepository) {}

  /** Refuses an entry that points at what is not there or does not fit. */
  async check(item: Pick<Written, 'register' | 'data'>): Promise<void> {
    const refs = await this.load(referredBy(item));
    const problems = problemsOf(item, refs);
    if (problems.length > 0) throw refusal(problems.map(({ path, message }) => ({ path: ['data', ...path].join('.'), message })));
  }

  /** Refuses a change of a water or substance that would leave entries pointing at nothing. */
  async checkDependents(changed: RegisterItemRow): Promise<void> {
    const dependents = await this.dependentsOf(changed.register, changed.id);
    for (const dependent of dependents) {
      const refs = await this.load(referredBy(dependent));
      refs[changed.register as 'waters' | 'substances'].set(changed.id, changed);
      // Only what this change breaks is held against it.
      const problem = problemsOf(dependent, refs).find(({ path }) => concerns(path, changed, dependent));
      if (problem) throw refusal([{ path: changed.register === 'waters' ? geometryField(changed) : 'data.measure', message: `${dependent.code} ${dependent.name} would no longer fit: ${problem.message}. Change or archive ${dependent.code} first` }]);
    }
  }

  /** Entries in use that refer to a water or a substance. */
  async dependentsOf(register: RegisterName, id: string): Promise<RegisterItemRow[]> {
    if (register !== 'waters' && register !== 'substances') return [];
    const rows = (await Promise.all((['receptors', 'sources', 'stations'] as const).map((name) => this.repository.all(name)))).flat();
    return rows.filter((row) => !row.isArchived && referredBy(row)[register].includes(id));
  }

  private async load(ids: { waters: string[]; substances: string[] }): Promise<Refs> {
    const rows = await this.repository.byIds([...ids.waters, ...ids.substances]);
    const of = (register: RegisterName) => new Map(rows.filter((row) => row.register === register).map((row) => [row.id, row]));
    return { waters: of('waters'), substances: of('substances') };
  }
}

const geometryField = (water: RegisterItemRow): string => ((water.data as RegisterData['waters']).kind === 'river' ? 'data.reaches' : 'data.area');

function concerns(path: RuleProblem['path'], changed: RegisterItemRow, dependent: RegisterItemRow): boolean {
  const [field, index] = path;
  if (changed.register === 'waters') return field === 'waterId' || field === 'channel' || field === 'position';
  return field === 'actionValues' && (dependent.data as ReceptorData).actionValues[Number(index)]?.substanceId === changed.id;
}

function referredBy({ register, data }: Pick<Written, 'register' | 'data'>): { waters: string[]; substances: string[] } {
  if (register === 'receptors') return { waters: [(data as ReceptorData).waterId], substances: (data as ReceptorData).actionValues.map(({ substanceId }) => substanceId) };
  if (register === 'sources') return { waters: [(data as SourceData).waterId], substances: (data as SourceData).holdings.map(({ substanceId }) => substanceId) };
  if (register === 'stations') return { waters: [(data as StationData).waterId], substances: [] };
  return { waters: [], substances: [] };
}

function problemsOf({ register, data }: Pick<Written, 'register' | 'data'>, refs: Refs): RuleProblem[] {
  const find = { water: (id: string) => (refs.waters.get(id) ?? null) as WaterRef, substance: (id: string) => (refs.substances.get(id) ?? null) as SubstanceRef };
  return (referenceProblems[register] as (data: unknown, finders: typeof find) => RuleProblem[])(data, find);
}

const refusal = (errors: FieldError[]): AppError => new AppError('bad-input', `${errors[0]!.path}: ${errors[0]!.message}`, { errors });
