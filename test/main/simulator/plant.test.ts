import { describe, expect, test } from 'vitest';
import { leatPassages } from '../../../main/simulator/leat.ts';
import { plantParameters } from '../../../main/simulator/parameters.ts';
import {
  advancePlant,
  cameraPose,
  createPlant,
  createWorld,
  type Plant,
} from '../../../main/simulator/plant.ts';
import { createRandom } from '../../../main/simulator/random.ts';
import { trueFoldingLoad, trueInversionTension } from '../../../main/simulator/true-strength.ts';
import { nearestPassage, wallsOf } from '../../../main/simulator/walls.ts';
import { builtInRig } from '../rig/built-in-rig.ts';

const rig = builtInRig();
const machine = (seed = 1) => {
  const parameters = plantParameters(rig, createRandom(seed));
  const world = createWorld(leatPassages(parameters.radius));
  const plant = createPlant(parameters);
  const run = (seconds: number): void => advancePlant(plant, parameters, world, seconds);
  const until = (holds: () => boolean): void => {
    for (let i = 0; i < 4000 && !holds(); i++) run(0.05);
    expect(holds()).toBe(true);
  };
  const grownTo = (length: number): void => {
    plant.setpoints.spoolSpeed = 0.5;
    until(() => plant.length >= length);
    plant.setpoints.spoolSpeed = 0;
    run(0.5);
  };
  return { plant, parameters, run, until, grownTo };
};
const steer = (plant: Plant, muscle: number, pressure: number): void => {
  plant.setpoints.musclePressures = [0, 0, 0];
  plant.setpoints.musclePressures[muscle] = pressure;
};

describe('the built-in rig', () => {
  test('lets out tail twice as fast as its tip grows (common practice)', () => {
    const { plant, grownTo } = machine();
    grownTo(3);
    expect(plant.payout).toBeCloseTo(2 * plant.length, 2);
  });

  test('is no copy of its rig file: every seed gives a machine a few per cent off', () => {
    const nominal = rig.body.E;
    const found = Array.from({ length: 40 }, (_, i) => machine(i + 1).parameters.E / nominal);
    expect(found.every((ratio) => ratio !== 1 && Math.abs(ratio - 1) <= 0.0401)).toBe(true);
    expect(Math.max(...found) - Math.min(...found)).toBeGreaterThan(0.02);
  });

  test('inverts at half the pressure force when nothing is lost (work balance: the tail moves at 2v)', () => {
    const { parameters } = machine();
    const lossless = { ...parameters, inversionYield: 0, friction: 0 };
    const force = trueInversionTension(lossless, { length: 1, pressure: 10_000, bend: 0, arm: 0 }, 0);
    expect(force).toBeCloseTo((10_000 * Math.PI * parameters.radius ** 2) / 2, 9);
  });

  test('a straight slender body folds at Euler’s load (Timoshenko & Gere, from memory)', () => {
    const { parameters } = machine();
    const slender = { ...parameters, crookedness: 0, setback: 0, G: 1e12 };
    const load = trueFoldingLoad(slender, { length: 20, pressure: 10_000, bend: 0, arm: 0 });
    const euler = (Math.PI ** 2 * parameters.E * Math.PI * parameters.radius ** 3) / 20 ** 2;
    expect(load / euler).toBeCloseTo(1, 3);
  });

  test('comes back when it is pulled from the base while it is short', () => {
    const { plant, grownTo, run } = machine();
    grownTo(0.8);
    plant.setpoints.spoolSpeed = -0.2;
    run(3);
    expect(plant.folded).toBe(0);
    expect(plant.length).toBeLessThan(0.6);
    expect(plant.payout).toBeCloseTo(2 * plant.length, 2);
  });

  test('folds when it is pulled from the base at six metres: tail comes, the tip does not', () => {
    const { plant, grownTo, run } = machine();
    grownTo(6);
    const { length, payout } = plant;
    const before = cameraPose(plant).quaternion;
    plant.setpoints.spoolSpeed = -0.2;
    run(3);
    expect(plant.folded).toBeGreaterThan(0.3);
    expect(payout - plant.payout).toBeGreaterThan(0.3);
    expect(plant.length).toBe(length);
    expect(cameraPose(plant).quaternion[2]! - before[2]!).toBeGreaterThan(0.2);
  });

  test('comes back from the fork by the tip retractor with hardly any tension at the base', () => {
    const { plant, grownTo, run } = machine();
    grownTo(9.5);
    plant.setpoints.grip = true;
    run(2);
    expect(plant.gripped).toBe(true);
    plant.setpoints.retractorSpeed = 0.2;
    plant.setpoints.spoolSpeed = -0.39;
    run(5);
    expect(plant.folded).toBe(0);
    expect(plant.length).toBeLessThan(8.7);
    expect(plant.tension).toBeLessThan(2);
  });

  test('stands still where its pressure no longer drives it', () => {
    const { plant, run } = machine();
    plant.setpoints.bodyPressure = 500;
    run(10);
    plant.setpoints.spoolSpeed = 0.3;
    run(3);
    expect(plant.length).toBeLessThan(0.01);
  });

  test('does not move while the wired emergency stop is pressed', () => {
    const { plant, run } = machine();
    plant.faults.emergencyStop = true;
    plant.setpoints.spoolSpeed = 0.5;
    run(2);
    expect(plant.payout).toBe(0);
  });
});

describe('in the leat', () => {
  const walls = wallsOf(leatPassages(0.08));

  test('a body that is not steered comes to the fork nearly straight', () => {
    const { plant, grownTo } = machine();
    grownTo(9.5);
    const [x, , z] = cameraPose(plant).position as [number, number, number];
    expect(z).toBeGreaterThan(9.4);
    expect(Math.abs(x)).toBeLessThan(0.15);
  });

  test.each([
    ['left', 2, -1],
    ['right', 1, 1],
  ] as const)('steering at the fork leads into the %s arm', (_, muscle, side) => {
    const { plant, grownTo } = machine();
    grownTo(9.3);
    steer(plant, muscle, 45_000);
    grownTo(10.3);
    steer(plant, muscle, 10_000);
    grownTo(12);
    const [x] = cameraPose(plant).position as [number, number, number];
    expect(Math.sign(x)).toBe(side);
    expect(Math.abs(x)).toBeGreaterThan(0.8);
  });

  test('no point of the body ever lies in a wall, whatever is steered', () => {
    const { plant, grownTo } = machine(3);
    for (let length = 1; length <= 14; length++) {
      steer(plant, (length * 7) % 3, 60_000);
      grownTo(Math.min(length, 11));
      for (const { x, z } of [...plant.body.laid, ...plant.body.free])
        expect(nearestPassage(walls, x, z).clearance).toBeGreaterThan(0.02);
    }
  });
});
