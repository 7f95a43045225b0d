import { expect, it } from 'vitest';
import { safeNext } from './safe-next';

it.each([
  [null, '/'],
  ['', '/'],
  ['/incidents/i1?show=all', '/incidents/i1?show=all'],
  ['https://elsewhere.example/', '/'],
  ['//elsewhere.example/', '/'],
  ['/\\elsewhere.example/', '/'],
  ['/\t/elsewhere.example/', '/'],
  ['/x/..//elsewhere.example', '/'],
  ['javascript:alert(1)', '/'],
  ['//[', '/'],
])('signing in with next=%j leads to %s', (next, expected) => {
  expect(safeNext(next)).toBe(expected);
});
