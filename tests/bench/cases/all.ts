import type { MakeCase } from '../harness';
import { puffCases } from './puffs';
import { channelCases } from './channel';
import { contourCases } from './contour';
import { poissonCases } from './poisson';
import { releaseCases } from './release';
import { volumeCases } from './volume';
import { walkCases } from './walk';

/** Every case by name, in the order they are run. */
export const cases: Record<string, MakeCase> = { ...puffCases, ...volumeCases, ...poissonCases, ...releaseCases, ...walkCases, ...channelCases, ...contourCases };
