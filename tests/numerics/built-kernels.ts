import { ensureKernels } from '../../server/solver/kernels/build.mjs';
import { loadKernels } from '../../server/workers/load-kernels';

/** The kernels as they stand in the sources: built first where that has not happened since the last change. */
export async function builtKernels() {
  await ensureKernels();
  return loadKernels();
}
