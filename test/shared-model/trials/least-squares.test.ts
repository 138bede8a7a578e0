import { describe, expect, it } from 'vitest';
import { leastSquares, studentT95 } from '../../../shared-model/trials/least-squares.ts';

// NIST Statistical Reference Datasets (StRD), data and certified values.
const NORRIS: readonly (readonly [y: number, x: number])[] = [
  [0.1, 0.2],
  [338.8, 337.4],
  [118.1, 118.2],
  [888.0, 884.6],
  [9.2, 10.1],
  [228.1, 226.5],
  [668.5, 666.3],
  [998.5, 996.3],
  [449.1, 448.6],
  [778.9, 777.0],
  [559.2, 558.2],
  [0.3, 0.4],
  [0.1, 0.6],
  [778.1, 775.5],
  [668.8, 666.9],
  [339.3, 338.0],
  [448.9, 447.5],
  [10.8, 11.6],
  [557.7, 556.0],
  [228.3, 228.1],
  [998.0, 995.8],
  [888.8, 887.6],
  [119.6, 120.2],
  [0.3, 0.3],
  [0.6, 0.3],
  [557.6, 556.8],
  [339.3, 339.1],
  [888.0, 887.2],
  [998.5, 999.0],
  [778.9, 779.0],
  [10.2, 11.1],
  [117.6, 118.3],
  [228.9, 229.2],
  [668.4, 669.1],
  [449.2, 448.9],
  [0.2, 0.5],
];
const MISRA1A: readonly (readonly [y: number, x: number])[] = [
  [10.07, 77.6],
  [14.73, 114.9],
  [17.94, 141.1],
  [23.93, 190.8],
  [29.61, 239.9],
  [35.18, 289.0],
  [40.02, 332.8],
  [44.82, 378.4],
  [50.76, 434.8],
  [55.05, 477.3],
  [61.01, 536.8],
  [66.4, 593.1],
  [75.47, 689.1],
  [81.78, 760.0],
];

describe('a least-squares fit', () => {
  it('meets the certified values of the NIST StRD data set Norris (a line)', () => {
    const fit = leastSquares(([a, b]) => NORRIS.map(([y, x]) => a! + b! * x - y), [0, 1]);
    expect(fit?.parameters[0]).toBeCloseTo(-0.262323073774029, 7);
    expect(fit?.parameters[1]).toBeCloseTo(1.00211681802045, 10);
    expect(fit?.standardErrors[0]).toBeCloseTo(0.232818234301152, 6);
    expect(fit?.standardErrors[1]).toBeCloseTo(0.429796848199937e-3, 9);
    expect(fit?.deviation).toBeCloseTo(0.884796396144373, 8);
  });

  it.each([
    [500, 1e-4],
    [250, 5e-4],
  ])(
    'meets the certified values of the NIST StRD data set Misra1a (a curve) from the start %d, %d',
    (b1, b2) => {
      const fit = leastSquares(
        ([p, q]) => MISRA1A.map(([y, x]) => p! * (1 - Math.exp(-q! * x)) - y),
        [b1, b2],
      );
      expect((fit?.parameters[0] ?? 0) / 2.3894212918e2).toBeCloseTo(1, 7);
      expect((fit?.parameters[1] ?? 0) / 5.5015643181e-4).toBeCloseTo(1, 7);
      expect((fit?.standardErrors[0] ?? 0) / 2.7070075241).toBeCloseTo(1, 4);
      expect((fit?.standardErrors[1] ?? 0) / 7.2668688436e-6).toBeCloseTo(1, 4);
      expect(fit?.deviation).toBeCloseTo(1.018787633e-1, 8);
    },
  );

  it('is none where the points do not determine the values', () => {
    expect(leastSquares(([a, b]) => [1, 1, 1].map((x) => a! + b! * x), [0, 0])).toBeNull();
    expect(leastSquares(([a, b]) => [a! + b!, a! - b!], [0, 0])).toBeNull();
    expect(leastSquares(() => [Number.NaN, 1, 2], [0])).toBeNull();
  });

  // NIST/SEMATECH e-Handbook, table of critical values of Student's t, 0.975.
  it('takes Student’s t from the handbook’s table, and goes on where that ends', () => {
    for (const [dof, t] of [
      [1, 12.706],
      [10, 2.228],
      [30, 2.042],
      [31, 2.04],
      [40, 2.021],
      [60, 2.0],
      [100, 1.984],
    ] as const)
      expect(Math.abs(studentT95(dof) - t)).toBeLessThan(6e-4);
  });
});
