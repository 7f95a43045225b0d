import type { EstimateDocument, EstimateWater } from '../../shared/schemas/estimate';
import { boundedFeatures } from './bounded/bounded-features';
import { boundedSolver } from './bounded/bounded-solver';
import { boxSolver } from './box/box-solver';
import { SolverInputError } from './errors';
import { networkFeatures } from './network/network-door';
import { networkSolver } from './network/network-solver';
import { openWaterSolver } from './open/open-solver';
import { riverSolver } from './river/river-solver';
import type { Solver } from './types';

type Way = Exclude<NonNullable<EstimateDocument['solver']>, 'auto'>;

/** Which solver takes which water in which way. */
const table: Record<EstimateWater['kind'], Partial<Record<Way, Solver>>> = {
  river: { 'closed-form': riverSolver, network: networkSolver },
  open: { 'closed-form': openWaterSolver, bounded: boundedSolver, box: boxSolver },
};

/** The closed form where it is exact enough, the numeric way where the water asks for it. */
function automatic(doc: EstimateDocument): Way {
  if (doc.water.kind === 'river') return networkFeatures(doc.water).length > 0 ? 'network' : 'closed-form';
  if (doc.water.box) return 'box';
  return boundedFeatures(doc, doc.water).length > 0 ? 'bounded' : 'closed-form';
}

export function solverFor(doc: EstimateDocument): Solver {
  const way = doc.solver === undefined || doc.solver === 'auto' ? automatic(doc) : doc.solver;
  const solver = table[doc.water.kind][way];
  if (solver) return solver;
  const ways = ['auto', ...Object.keys(table[doc.water.kind])].join(', ');
  throw new SolverInputError([{ path: 'solver', message: `"${way}" does not solve this kind of water: choose one of ${ways}` }]);
}
