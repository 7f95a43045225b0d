import { describe, expect, it } from 'vitest';
import { builtKernels } from './built-kernels';
import { plainChannelStep } from './oracles/channel-step';

const kernels = await builtKernels();

describe('stream tubes', () => {
  it.each([[40, 16], [17, 5], [9, 1], [1, 3], [2, 8]])('of %i cells and %i tubes agree with the plain step', (cells, tubes) => {
    const faces = Float64Array.from({ length: cells + 1 }, (_, i) => 0.4 + 0.3 * Math.sin(i));
    const shares = Array.from({ length: cells }, (_, i) => Array.from({ length: tubes - 1 }, (_, k) => 0.2 + 0.15 * Math.sin(i + 2 * k)));
    const channel = kernels.channelTubes(cells, tubes);
    channel.setDispersion(faces);
    channel.setExchange(Float64Array.from(shares.flat()));
    let plain = Array.from({ length: cells }, (_, i) => Array.from({ length: tubes }, (_, k) => Math.exp(-((i - 3) ** 2) / 8) * (1 + k)));
    plain.forEach((row, i) => row.forEach((value, k) => channel.add(i, k, value)));
    const out = new Float64Array(cells * tubes);
    for (let n = 0; n < 2 * cells + 3; n++) {
      const inflow = Array.from({ length: tubes }, (_, k) => (n % 4) * 0.1 * k);
      const step = plainChannelStep(plain, inflow, faces, shares, 0.995);
      channel.step(Float64Array.from(inflow), 0.995);
      plain = step.c;
      // A few dozen roundings a step of values up to 16.
      step.outflow.forEach((value, k) => expect(Math.abs(channel.outflow[k]! - value)).toBeLessThan(1e-12));
      channel.read(out);
      out.forEach((value, at) => expect(Math.abs(value - plain[Math.floor(at / tubes)]![at % tubes]!)).toBeLessThan(1e-12));
    }
    expect(channel.get(cells - 1, tubes - 1)).toBe(out[cells * tubes - 1]);
  });

  it('keep mass: what stands in the channel and what has left is what came in', () => {
    const channel = kernels.channelTubes(200, 16);
    channel.setDispersion(new Float64Array(201).fill(0.8));
    channel.setExchange(new Float64Array(200 * 15).fill(0.3));
    channel.add(4, 0, 1000);
    const inflow = new Float64Array(16).fill(0.25);
    let [came, left] = [1000, 0];
    for (let n = 0; n < 500; n++) {
      channel.step(inflow);
      came += 4;
      left += channel.outflow.reduce((a, b) => a + b, 0);
    }
    const out = new Float64Array(3200);
    channel.read(out);
    // 500 steps of 3 200 values, each rounded a dozen times.
    expect(Math.abs(out.reduce((a, b) => a + b, 0) + left - came) / came).toBeLessThan(1e-12);
  });

  it('move a cloud on without spreading it where there is no dispersion', () => {
    const channel = kernels.channelTubes(30, 2);
    channel.add(2, 1, 7);
    for (let n = 0; n < 20; n++) channel.step(new Float64Array(2));
    expect(channel.get(22, 1)).toBe(7);
    expect(channel.get(21, 1)).toBe(0);
  });

  it('refuse exchange that would empty a tube, negative dispersion and a channel of nothing', () => {
    const channel = kernels.channelTubes(3, 3);
    expect(() => channel.setExchange(new Float64Array(6).fill(0.6))).toThrow(/Tube 1 of cell 0 exchanges 1.2 of itself/);
    expect(() => channel.setExchange(new Float64Array(5))).toThrow(/is 6 shares, got 5/);
    expect(() => channel.setDispersion(new Float64Array(4).fill(-1))).toThrow(/4 dispersion numbers/);
    expect(() => kernels.channelTubes(0, 3)).toThrow(/needs cells/);
  });
});
