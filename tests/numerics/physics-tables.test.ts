import { describe, expect, it } from 'vitest';
import { IntegralTable } from '../../server/solver/math/function-table';

describe('a table of a running integral', () => {
  it('meets a jump far from zero in few evaluations, where times are coarse beside the tolerance', () => {
    let evaluations = 0;
    const jumpS = 11_176.818783239845;
    const table = new IntegralTable(
      (t, out) => {
        evaluations++;
        out[0] = t < jumpS ? -0.94 : 1;
      },
      1,
      [11_076.923076923078, 11_538.461538461539],
      1e-10,
    );
    expect(evaluations).toBeLessThan(20_000);
    const out = new Float64Array(1);
    table.at(11_500, out);
    expect(Math.abs(out[0]! - (-0.94 * (jumpS - 11_076.923076923078) + (11_500 - jumpS)))).toBeLessThan(1e-7);
  });
});
