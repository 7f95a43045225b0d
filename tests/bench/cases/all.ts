import type { MakeCase } from '../harness';
import { puffCases } from './puffs';
import { channelCases } from './channel';
import { contourCases } from './contour';
import { payloadCases } from './payload';
import { poissonCases } from './poisson';
import { releaseCases } from './release';
import { storeCases } from './store';
import { threadCases } from './threads';
import { volumeCases } from './volume';
import { walkCases } from './walk';

/** Every case by name, in the order they are run. */
export const cases: Record<string, MakeCase> = { ...puffCases, ...volumeCases, ...poissonCases, ...releaseCases, ...walkCases, ...channelCases, ...contourCases, ...payloadCases, ...storeCases, ...threadCases };
