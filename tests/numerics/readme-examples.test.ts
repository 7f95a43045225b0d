import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { solveEstimate } from '../../server/solver/estimate';
import { estimateDocumentSchema } from '../../shared/schemas/estimate';

const examples = [...readFileSync('README.md', 'utf8').matchAll(/<!-- example -->\s*```json\n([\s\S]*?)```/g)].map((match) => JSON.parse(match[1]!) as { title: string });

describe('the examples of the front page', () => {
  it('are two', () => expect(examples).toHaveLength(2));

  it.each(examples.map((example) => [example.title, example] as const))('"%s" is a valid document whose receptor may be reached above its action value', (_title, example) => {
    const result = solveEstimate(estimateDocumentSchema.parse(example), () => undefined);
    expect(result.receptors.map(({ verdict }) => verdict)).toEqual(['may exceed']);
  });
});
