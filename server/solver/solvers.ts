import type { EstimateWater } from '../../shared/schemas/estimate';
import { openWaterSolver } from './open/open-solver';
import { riverSolver } from './river/river-solver';
import type { Solver } from './types';

/** Which solver takes which water. */
const table: Record<EstimateWater['kind'], Solver> = { river: riverSolver, open: openWaterSolver };

export const solverFor = (water: EstimateWater): Solver => table[water.kind];
