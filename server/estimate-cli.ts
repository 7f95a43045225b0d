/**
 * Solves one estimate document without server or database: `npm run --silent estimate -- scenario.json`.
 * One JSON result on standard output; errors on standard error, one line a field, and exit status 2.
 */
import { readFileSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { decodeValue, type FrameHead } from '../shared/frames';
import { estimateDocumentSchema, type EstimateDocument } from '../shared/schemas/estimate';
import type { FieldError } from '../shared/problem';
import { SolverInputError } from './solver/errors';
import { solveEstimate } from './solver/estimate';
import type { EstimateSink } from './solver/types';

const BAD_INPUT = 2;

const help = `Usage: npm run --silent estimate -- [--frames] scenario.json

Solves one estimate document (the JSON that POST /api/estimates accepts) and prints one JSON result:
levels, receptor answers with their series, checks, books, working. "-" reads standard input.

  --frames   adds "frames" and "envelope": grid and concentrations in kg/m3 (or counts/m3); null where there is no estimate
  --preview  coarser grids, as while sketching
  --help     this text

Exit status: 0 solved; 2 bad input, with one line "path: message" for each field on standard error.
Estimates are for qualified people; local rules and licensed review come first.`;

class BadInput extends Error {
  constructor(readonly errors: FieldError[]) {
    super('bad input');
  }
}

function readArguments(): { file: string; withFrames: boolean; preview: boolean } | null {
  try {
    const { values, positionals } = parseArgs({ allowPositionals: true, options: { frames: { type: 'boolean' }, preview: { type: 'boolean' }, help: { type: 'boolean' } } });
    if (values.help) return null;
    if (positionals.length !== 1) throw new BadInput([{ path: 'arguments', message: `Give one file, or "-" for standard input; got ${positionals.length}. See --help` }]);
    return { file: positionals[0]!, withFrames: values.frames ?? false, preview: values.preview ?? false };
  } catch (error) {
    if (error instanceof BadInput) throw error;
    throw new BadInput([{ path: 'arguments', message: `${(error as Error).message}. See --help` }]);
  }
}

function readDocument(file: string): EstimateDocument {
  const name = file === '-' ? 'standard input' : file;
  let text: string;
  try {
    text = readFileSync(file === '-' ? 0 : file, 'utf8');
  } catch (error) {
    throw new BadInput([{ path: name, message: `Cannot be read: ${(error as Error).message}` }]);
  }
  let json: unknown;
  try {
    json = JSON.parse(text);
  } catch (error) {
    throw new BadInput([{ path: name, message: `This is not JSON: ${(error as Error).message}` }]);
  }
  const parsed = estimateDocumentSchema.safeParse(json);
  if (!parsed.success) throw new BadInput(parsed.error.issues.map((issue) => ({ path: issue.path.join('.') || name, message: issue.message })));
  return parsed.data;
}

type Decoded = { timeS: number | null; grid: FrameHead['grid']; values: (number | null)[] };

function solve(doc: EstimateDocument, withFrames: boolean, preview: boolean): object {
  const frames: Decoded[] = [];
  let envelope: Decoded | null = null;
  const keep: EstimateSink = (head, payload) => {
    if ((head.type !== 'frame' && head.type !== 'envelope') || !payload) return;
    const codes = new Uint16Array(payload.buffer, payload.byteOffset, payload.byteLength / 2);
    const values = Array.from(codes, (code) => {
      const value = decodeValue(code, head.scale);
      return Number.isNaN(value) ? null : Number(value.toPrecision(6));
    });
    if (head.type === 'frame') frames.push({ timeS: head.timeS, grid: head.grid, values });
    else envelope = { timeS: null, grid: head.grid, values };
  };
  const result = solveEstimate(doc, withFrames ? keep : () => undefined, { preview });
  return withFrames ? { ...result, frames, envelope } : result;
}

function main(): void {
  try {
    const asked = readArguments();
    process.stdout.write(asked ? `${JSON.stringify(solve(readDocument(asked.file), asked.withFrames, asked.preview))}\n` : `${help}\n`);
  } catch (error) {
    if (!(error instanceof BadInput) && !(error instanceof SolverInputError)) throw error;
    for (const { path, message } of error.errors) process.stderr.write(`${path}: ${message}\n`);
    process.exitCode = BAD_INPUT;
  }
}

main();
