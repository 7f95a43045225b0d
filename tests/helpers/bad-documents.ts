import fc from 'fast-check';

type Json = null | boolean | number | string | Json[] | { [key: string]: Json };

/** Values that have broken servers before. */
const nasties: Json[] = [
  null, true, 0, -1, -0.0001, 1e308, -1e308, 5e-324, 9_007_199_254_740_993, 1.5, '', ' ', 'NaN', 'Infinity', '1e9', '\u0000', '\ud800', '🏞️', 'x'.repeat(70_000),
  '2031-02-30', '2031-05-12T06:40:00', '2031-05-12T24:61:00Z', '9999-12-31T23:59:59+14:00', "'; drop table runs; --", '../../etc/passwd', '%00', '__proto__', 'constructor',
  [], {}, [[]], [null], { __proto__: null }, { constructor: { prototype: 1 } }, { length: 1e9 }, Array.from({ length: 2_000 }, () => 0),
];
export const nasty: fc.Arbitrary<Json> = fc.oneof(fc.constantFrom(...nasties), fc.double({ noNaN: true, noDefaultInfinity: true }), fc.string(), fc.jsonValue({ maxDepth: 3 }) as fc.Arbitrary<Json>);

type Path = (string | number)[];
const pathsOf = (value: unknown, at: Path = []): Path[] =>
  value === null || typeof value !== 'object' ? [at] : [at, ...Object.entries(value).flatMap(([key, item]) => pathsOf(item, [...at, Array.isArray(value) ? Number(key) : key]))];

function replaced(value: unknown, [key, ...rest]: Path, by: unknown): unknown {
  if (key === undefined) return by;
  const copy: Record<string | number, unknown> | unknown[] = Array.isArray(value) ? [...value] : { ...(value as object) };
  (copy as Record<string | number, unknown>)[key] = replaced((value as Record<string | number, unknown>)[key], rest, by);
  return copy;
}

/** A good document with one to three of its parts replaced by something nasty. */
export const spoiled = (good: object): fc.Arbitrary<unknown> =>
  fc
    .array(fc.tuple(fc.constantFrom(...pathsOf(good).filter((path) => path.length > 0)), nasty), { minLength: 1, maxLength: 3 })
    .map((changes) => changes.reduce<unknown>((document, [path, by]) => (pathsOf(document).some((known) => known.join() === path.join()) ? replaced(document, path, by) : document), good));
