import { describe, expect, it } from 'vitest';
import { canonicalJson, documentHash } from './canonical-json';

describe('the hash of a document', () => {
  it('does not depend on the order of keys at any depth', () => {
    expect(canonicalJson({ b: [{ y: 1, x: 2 }], a: null })).toBe('{"a":null,"b":[{"x":2,"y":1}]}');
    expect(documentHash({ a: { c: 1, b: 2 } })).toBe(documentHash({ a: { b: 2, c: 1 } }));
  });

  it('depends on every value and on the order of lists', () => {
    expect(documentHash({ a: [1, 2] })).not.toBe(documentHash({ a: [2, 1] }));
    expect(documentHash({ a: 1 })).not.toBe(documentHash({ a: 1.0000001 }));
  });
});
