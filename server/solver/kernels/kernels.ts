import { compileKernel, type CompiledKernel } from './host';
import { ChannelTubes } from './channel';
import { PoissonSolver } from './poisson';
import { PuffSum32, PuffSum64 } from './puffs';
import { ReleasePoints } from './release';
import { VolumeGrid } from './volume';
import { BoxWalk } from './walk';

/** The modules that `build.mjs` makes, by name. */
export const KERNEL_NAMES = ['puffs', 'volume', 'poisson', 'channel', 'walk', 'release'] as const;
export type KernelName = (typeof KERNEL_NAMES)[number];
export type KernelBytes = Readonly<Record<KernelName, Uint8Array>>;

/** Makers of kernel objects. Each object owns one private memory, made once and reused for every call. */
export type Kernels = ReturnType<typeof createKernels>;

/** Compiles the modules, each at its first use. The bytes are passed in: the solver reads no files. */
export function createKernels(bytes: KernelBytes) {
  const compiled = new Map<KernelName, CompiledKernel>();
  const kernel = (name: KernelName): CompiledKernel => {
    const known = compiled.get(name) ?? compileKernel(bytes[name]);
    compiled.set(name, known);
    return known;
  };
  return {
    puffSum64: (nx: number, ny: number, maxPuffs: number) => new PuffSum64(kernel('puffs'), nx, ny, maxPuffs),
    puffSum32: (nx: number, ny: number, maxPuffs: number, kappa?: number) => new PuffSum32(kernel('puffs'), nx, ny, maxPuffs, kappa),
    volumeGrid: (nx: number, ny: number, isWater: Uint8Array) => new VolumeGrid(kernel('volume'), nx, ny, isWater),
    poissonSolver: (nx: number, ny: number) => new PoissonSolver(kernel('poisson'), nx, ny),
    channelTubes: (cells: number, tubes: number) => new ChannelTubes(kernel('channel'), cells, tubes),
    boxWalk: (paths: number, lengthXM: number, lengthYM: number, seed: number) => new BoxWalk(kernel('walk'), paths, lengthXM, lengthYM, seed),
    releasePoints: () => new ReleasePoints(kernel('release')),
  };
}
