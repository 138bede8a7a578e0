import { describe, expect, it } from 'vitest';
import { plantParameters } from '../../../main/simulator/parameters.ts';
import { createRandom } from '../../../main/simulator/random.ts';
import { trueFoldingLoad } from '../../../main/simulator/true-strength.ts';
import { defaultMargin } from '../../../shared-model/retraction/judge.ts';
import { applyTrials } from '../../../shared-model/trials/apply-trials.ts';
import { fitTrial } from '../../../shared-model/trials/fit-trial.ts';
import { capacityOf } from '../../../shared-model/trials/transition.ts';
import type {
  TrialMachine,
  TrialPoints,
  TrialRecord,
  TrialValue,
} from '../../../shared-model/trials/trial.ts';
import { builtInRig } from '../../main/rig/built-in-rig.ts';

const rig = builtInRig();
const machine: TrialMachine = rig;
const A = Math.PI * rig.body.radius ** 2;

const fitted = (trial: TrialPoints) => {
  const fit = fitTrial(trial, machine);
  if (!fit.ok) throw new Error(fit.why);
  const of = (name: TrialValue) => fit.values.find((one) => one.name === name)!;
  return { fit, of };
};
const why = (trial: TrialPoints): string => {
  const fit = fitTrial(trial, machine);
  return fit.ok ? '' : fit.why;
};

/** Points of a true machine, with noise from a seeded source. */
const tails = (seed: number, scale = 1.012, offset = 0.03): TrialPoints => {
  const random = createRandom(seed);
  return {
    kind: 'tail-length',
    points: [0.5, 1, 2, 3, 4, 5, 6].map((tape) => ({
      tape: tape + 0.003 * random.normal(),
      payout: (2 * tape - offset) / scale,
    })),
  };
};
const pulls = (seed: number, Y = 1600, mu = 0.31): TrialPoints => {
  const random = createRandom(seed);
  return {
    kind: 'inversion',
    points: [4000, 6000, 8000, 10_000].flatMap((pressure) =>
      [0, 0.8, 1.6].map((turn) => ({
        pressure,
        turn,
        length: 1,
        // Written out for an even bend: ∫₀¹ e^{μΘs} ds = (e^{μΘ} − 1)/μΘ.
        tension:
          (A / 2) * (pressure + Y) * Math.exp(mu * turn) +
          mu * rig.body.tailWeight * (turn === 0 ? 1 : (Math.exp(mu * turn) - 1) / (mu * turn)) +
          0.5 * random.normal(),
      })),
    ),
  };
};
const bends = (seed: number, gain = 0.62): TrialPoints => {
  const random = createRandom(seed);
  const curve = rig.muscles.contraction;
  return {
    kind: 'muscle-bend',
    points: curve.slice(1).map(([pressure, contraction]) => ({
      pressure,
      // One muscle of three: κ = 2ε/(3·r_m·(1 − ε/3)), Webster & Jones, IJRR (2010).
      bend:
        (gain * 2 * contraction) / (3 * rig.muscles.radius * (1 - contraction / 3)) + 0.01 * random.normal(),
    })),
  };
};

describe('a trial of the bench', () => {
  it('finds scale and zero of the spool’s encoder', () => {
    const { of } = fitted(tails(3));
    expect(Math.abs(of('payoutScale').value - 1.012)).toBeLessThan(of('payoutScale').halfWidth * 1.5);
    expect(Math.abs(of('payoutOffset').value - 0.03)).toBeLessThan(of('payoutOffset').halfWidth * 1.5);
  });

  it('finds yield and friction of inversion from straight and bent pulls', () => {
    const { of } = fitted(pulls(3));
    expect(of('inversionYield').value).toBeCloseTo(1600, -2);
    expect(of('friction').value).toBeCloseTo(0.31, 1);
  });

  it('finds the gain of the steering muscles', () => {
    expect(fitted(bends(3)).of('bendGain').value).toBeCloseTo(0.62, 1);
  });

  it('gives bands that hold the true value in about 95 of 100 trials', () => {
    const runs = 400;
    const holds = (make: (seed: number) => TrialPoints, name: TrialValue, truth: number): number => {
      let inside = 0;
      for (let seed = 1; seed <= runs; seed++) {
        const one = fitted(make(seed)).of(name);
        if (Math.abs(one.value - truth) <= one.halfWidth) inside++;
      }
      return inside / runs;
    };
    for (const share of [
      holds(tails, 'payoutScale', 1.012),
      holds(tails, 'payoutOffset', 0.03),
      holds(pulls, 'inversionYield', 1600),
      holds(pulls, 'friction', 0.31),
      holds(bends, 'bendGain', 0.62),
    ]) {
      // Three standard deviations of a share of 0.95 in 400.
      expect(share).toBeGreaterThan(0.917);
      expect(share).toBeLessThan(0.983);
    }
  });

  it('draws the fit through its points', () => {
    for (const trial of [tails(1), pulls(1), bends(1)]) {
      const { plot } = fitted(trial).fit;
      for (const [x, y] of plot.points) {
        const next = plot.line.findIndex((one) => one.x >= x - 1e-9);
        const near = plot.line[Math.max(0, next)]!;
        expect(Math.abs(near.y - y)).toBeLessThan(0.12 * (Math.abs(y) + 1));
        expect(near.band).toBeGreaterThanOrEqual(0);
      }
    }
  });

  /** Folds of the simulator's true machine: its own formula of strength, its own parameters. */
  const folds = (seed: number, noise: number): TrialPoints => {
    const random = createRandom(seed);
    const plant = plantParameters(rig, random);
    return {
      kind: 'transition',
      points: [0, 0, 0, 0.3, 0.3, 0.3, 0.7, 0.7, 0.7].map((bend, i) => {
        const length = 1 + 0.5 * (i % 3);
        const pressure = 9000;
        // Arm of one arc: the versine from its tip (geometry).
        const arm = bend === 0 ? 0 : (1 - Math.cos(bend * length)) / bend;
        const tension = trueFoldingLoad(plant, { length, pressure, bend: bend * length, arm });
        return { length, bend, pressure, tension: tension * (1 + noise * random.normal()) };
      }),
    };
  };

  it('finds what share of the full collapse a true machine bears, and the margin that its scatter justifies', () => {
    for (const seed of [1, 2, 3, 4, 5]) {
      const { of } = fitted(folds(seed, 0.01));
      const plant = plantParameters(rig, createRandom(seed));
      expect(Math.abs(of('collapseFraction').value - plant.collapse)).toBeLessThan(0.06);
      expect(of('eccentricityFloor').value).toBeLessThan(0.2);
      expect(of('margin').value).toBeGreaterThanOrEqual(1.25);
      expect(of('margin').value).toBeLessThan(1.4);
    }
    const seeds = Array.from({ length: 20 }, (_, i) => i + 1);
    const margins = seeds.map((seed) => {
      const fit = fitTrial(folds(seed, 0.15), machine);
      return fit.ok ? fit.values.find((one) => one.name === 'margin')!.value : Number.POSITIVE_INFINITY;
    });
    expect(margins.filter((margin) => margin > 1.3).length).toBeGreaterThan(15);
  });

  it('of folding never lets a pull be permitted that would fold the true machine', () => {
    let within = 0;
    const seeds = Array.from({ length: 60 }, (_, i) => i + 1);
    for (const seed of seeds) {
      const trial = folds(seed, 0.03);
      const { fit, of } = fitted(trial);
      const plant = plantParameters(rig, createRandom(seed));
      if (Math.abs(of('collapseFraction').value - plant.collapse) <= of('collapseFraction').halfWidth)
        within++;
      const record: TrialRecord = {
        trial,
        values: [...fit.values],
        before: [],
        date: '2026-05-01T00:00:00Z',
        initials: 'ab',
        expires: '2026-11-01T00:00:00Z',
      };
      const { body } = applyTrials(machine, [record], '2026-06-01T00:00:00Z');
      const random = createRandom(1000 + seed);
      for (let i = 0; i < 20; i++) {
        const length = 0.3 + 4 * random.uniform();
        const bend = Math.min(1.2, 3 / length) * random.uniform();
        const pressure = 5000 + 9000 * random.uniform();
        const arm = (1 - Math.cos(bend * length)) / bend;
        const folding = trueFoldingLoad(plant, { length, pressure, bend: bend * length, arm });
        expect(
          capacityOf({ length, bend, pressure }, body)(body.collapseFraction, body.eccentricityFloor),
        ).toBeLessThanOrEqual(defaultMargin(body) * folding);
      }
    }
    // Three standard deviations of a share of 0.95 in 60.
    expect(within / seeds.length).toBeGreaterThan(0.865);
  });

  it.each<[string, TrialPoints, RegExp]>([
    ['too few lengths', { kind: 'tail-length', points: tails(1).points.slice(0, 3) as never }, /Needs 4/],
    [
      'lengths all alike',
      { kind: 'tail-length', points: [1, 1, 1, 1].map((tape) => ({ tape, payout: 2 })) },
      /span/,
    ],
    ['a wrong reel', tails(1, 1.4), /scale/],
    ['a zero far off', tails(1, 1, 0.8), /zero/],
    [
      'pulls in no bend',
      {
        kind: 'inversion',
        points: pulls(1).points.filter((one) => (one as { turn: number }).turn === 0) as never,
      },
      /Needs 5|bends/,
    ],
    ['a load cell that reads too little', pulls(1, -900), /below zero/],
    ['a friction that cannot be', pulls(1, 1600, 2.2), /friction/],
    ['bends in the wrong unit', bends(1, 60), /gain/],
    [
      'folds of one shape',
      { kind: 'transition', points: folds(1, 0).points.map((p) => ({ ...p, bend: 0 })) as never },
      /bends/,
    ],
    [
      'folds at more than full collapse',
      {
        kind: 'transition',
        points: folds(1, 0).points.map((p) => ({
          ...p,
          tension: 2 * (p as { tension: number }).tension,
        })) as never,
      },
      /not possible|do not determine/,
    ],
    [
      'a fold without tension',
      {
        kind: 'transition',
        points: folds(1, 0).points.map((p, i) => ({ ...p, tension: i === 0 ? 0 : 50 })) as never,
      },
      /above zero/,
    ],
  ])('is refused with the reason for %s', (_, trial, reason) => {
    expect(why(trial)).toMatch(reason);
  });
});
