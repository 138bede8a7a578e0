import type { Passage } from '../../shared-model/contract/frame.ts';
import type { PlantParameters } from './parameters.ts';
import { createTrueBody, largestArm, layOut, type TrueBody, tipOf, totalBend } from './true-body.ts';
import { type TrueState, trueFoldingLoad, trueInversionTension } from './true-strength.ts';
import { type Walls, wallsOf } from './walls.ts';

/** What the master has set. SI. */
export interface PlantSetpoints {
  spoolSpeed: number;
  retractorSpeed: number;
  bodyPressure: number;
  musclePressures: number[];
  grip: boolean;
}

export interface PlantFaults {
  leak: boolean;
  motorStall: boolean;
  retractorLost: boolean;
  retractorStall: boolean;
  /** The wall folds at a fraction of what it should. */
  weakWall: boolean;
  emergencyStop: boolean;
}

/** The machine itself. All true values, SI; sensors are elsewhere. */
export interface Plant {
  readonly setpoints: PlantSetpoints;
  readonly faults: PlantFaults;
  time: number;
  pressure: number;
  spoolSpeed: number;
  retractorSpeed: number;
  /** λ and L [m] */
  payout: number;
  length: number;
  tension: number;
  travel: number;
  gripped: boolean;
  gripProgress: number;
  musclePressures: number[];
  /** Tail pulled in while the body folded instead of the tip turning [m]. */
  folded: number;
  roll: number;
  readonly body: TrueBody;
  /** Bend and arm of the body when it was last walked along. */
  walked: {
    readonly at: number;
    readonly length: number;
    readonly bend: number;
    readonly arm: number;
  } | null;
}

/** Inner time step [s]. */
const STEP = 0.005;
/** Nominal body pressure at start: the machine stands ready at its base [Pa]. */
const START_PRESSURE = 9000;
const GRIP_TIME = 1.5;
const MUSCLE_LAG = 0.3;
const PRESSURE_LAG = 0.4;
const FILL_RATE = 3000;
const LEAK_RATE = 900;
const SPOOL_ACCELERATION = 1.5;
const RETRACTOR_ACCELERATION = 0.8;
/** Stiffness of the tail when it is pulled taut against a gripping retractor [N/m]. */
const TAIL_STIFFNESS = 400;
/** Share of its strength that a weak wall keeps. */
const WEAK_WALL = 0.5;

export const createPlant = (parameters: PlantParameters): Plant => ({
  setpoints: {
    spoolSpeed: 0,
    retractorSpeed: 0,
    bodyPressure: START_PRESSURE,
    musclePressures: parameters.muscleAngles.map(() => 0),
    grip: false,
  },
  faults: {
    leak: false,
    motorStall: false,
    retractorLost: false,
    retractorStall: false,
    weakWall: false,
    emergencyStop: false,
  },
  time: 0,
  pressure: START_PRESSURE,
  spoolSpeed: 0,
  retractorSpeed: 0,
  payout: 0,
  length: 0,
  tension: 0,
  travel: 0,
  gripped: false,
  gripProgress: 0,
  musclePressures: parameters.muscleAngles.map(() => 0),
  folded: 0,
  roll: 0,
  body: createTrueBody(),
  walked: null,
});

/** What a plant stands in. */
export interface PlantWorld {
  readonly walls: Walls;
}
export const createWorld = (passages: readonly Passage[]): PlantWorld => ({ walls: wallsOf(passages) });

/** Moves the machine on by `dt` [s] in fixed inner steps. */
export const advancePlant = (plant: Plant, p: PlantParameters, world: PlantWorld, dt: number): void => {
  const steps = Math.round(dt / STEP);
  for (let i = 0; i < steps; i++) {
    stepMotors(plant, STEP);
    stepPressures(plant, STEP);
    stepGrip(plant, STEP);
    stepTail(plant, p, STEP);
    plant.time += STEP;
    if (i % 4 === 0 || i === steps - 1) lie(plant, p, world);
  }
  plant.roll = 0.06 * Math.sin(plant.length / 3.1);
};

const lie = (plant: Plant, p: PlantParameters, world: PlantWorld): void =>
  layOut(plant.body, world.walls, plant.length, p.freeEnd, trueBend(plant, p), p.radius);

/** Sum of the muscles' pulls along the machine's own contraction curve. */
export const trueBend = (plant: Plant, p: PlantParameters): { right: number; up: number } => {
  let right = 0;
  let up = 0;
  plant.musclePressures.forEach((pressure, i) => {
    const pull = contractionAt(p.contraction, pressure) * p.bendPerContraction;
    right += pull * Math.cos(p.muscleAngles[i]!);
    up -= pull * Math.sin(p.muscleAngles[i]!);
  });
  return { right, up };
};

const contractionAt = (curve: PlantParameters['contraction'], pressure: number): number => {
  const next = curve.findIndex(([p]) => p > pressure);
  if (next === 0) return 0;
  const [p0, c0] = curve[next < 0 ? curve.length - 1 : next - 1]!;
  if (next < 0) return c0;
  const [p1, c1] = curve[next]!;
  return c0 + ((pressure - p0) / (p1 - p0)) * (c1 - c0);
};

const stepMotors = (plant: Plant, dt: number): void => {
  const { setpoints, faults } = plant;
  const stopped = faults.emergencyStop;
  const spool = stopped || faults.motorStall ? 0 : setpoints.spoolSpeed;
  const retractor = stopped || faults.retractorStall || !plant.gripped ? 0 : setpoints.retractorSpeed;
  plant.spoolSpeed = approach(plant.spoolSpeed, spool, SPOOL_ACCELERATION * dt);
  plant.retractorSpeed = approach(plant.retractorSpeed, retractor, RETRACTOR_ACCELERATION * dt);
};

const stepPressures = (plant: Plant, dt: number): void => {
  const wanted = (plant.setpoints.bodyPressure - plant.pressure) / PRESSURE_LAG;
  const flow = Math.max(-FILL_RATE, Math.min(FILL_RATE, wanted));
  const leak = plant.faults.leak ? FILL_RATE + LEAK_RATE : 0;
  plant.pressure = Math.max(0, plant.pressure + (flow - leak) * dt);
  plant.setpoints.musclePressures.forEach((setpoint, i) => {
    const now = plant.musclePressures[i] ?? 0;
    plant.musclePressures[i] = now + ((setpoint - now) * dt) / MUSCLE_LAG;
  });
};

const stepGrip = (plant: Plant, dt: number): void => {
  const wanted = plant.setpoints.grip && !plant.faults.retractorLost;
  plant.gripProgress = wanted ? Math.min(GRIP_TIME, plant.gripProgress + dt) : 0;
  plant.gripped = plant.gripProgress >= GRIP_TIME;
};

/** Tail, tip and tension for one inner step. */
const stepTail = (plant: Plant, p: PlantParameters, dt: number): void => {
  const state = trueState(plant);
  if (plant.gripped) stepGripped(plant, p, state, dt);
  else if (plant.spoolSpeed < 0) stepPulled(plant, p, state, dt);
  else stepReleased(plant, p, state, dt);
  plant.payout = Math.max(0, plant.payout);
};

/** The retractor turns the tip; the spool takes up what comes, or pulls the tail taut against the grip. */
const stepGripped = (plant: Plant, p: PlantParameters, state: TrueState, dt: number): void => {
  const inverted = Math.min(plant.length, Math.max(0, plant.retractorSpeed) * dt);
  plant.length -= inverted;
  plant.travel += inverted;
  plant.payout += plant.spoolSpeed * dt;
  const over = 2 * plant.length - plant.payout;
  const drag = plant.spoolSpeed < 0 ? 0.3 * p.friction * p.tailWeight * plant.length : 0;
  let tension = 0.1 + drag;
  if (over > 0) {
    tension += TAIL_STIFFNESS * over;
    // A spool stalls against its torque limit long before the tail tears.
    if (tension > 250) plant.payout = 2 * plant.length - 250 / TAIL_STIFFNESS;
    if (tension > trueFoldingLoad(p, state)) plant.folded = Math.max(plant.folded, 0.02);
  }
  plant.tension = settle(plant.tension, tension, dt);
};

/** Pulled from the base: the tip turns, unless that takes more than the body bears; then it folds. */
const stepPulled = (plant: Plant, p: PlantParameters, state: TrueState, dt: number): void => {
  const taken = Math.min(plant.payout, -plant.spoolSpeed * dt);
  plant.payout -= taken;
  const slack = plant.payout - (2 * plant.length - plant.folded);
  if (slack >= 0) {
    plant.tension = settle(plant.tension, 0.2, dt);
    return;
  }
  const needed = trueInversionTension(p, state, -plant.spoolSpeed / 2);
  const bears = (plant.faults.weakWall ? WEAK_WALL : 1) * trueFoldingLoad(p, state);
  if (plant.folded > 0 || needed > bears) {
    plant.folded += taken;
    plant.tension = settle(plant.tension, 0.3 * needed * Math.exp(-plant.folded / 0.05) + 4, dt);
    return;
  }
  plant.length = Math.max(0, (plant.payout + plant.folded) / 2);
  plant.tension = settle(plant.tension, plant.length > 0 ? needed : 0, dt);
};

/** Spool holds or lets out: the tip grows into what tail there is, as fast as the pressure drives it. */
const stepReleased = (plant: Plant, p: PlantParameters, state: TrueState, dt: number): void => {
  const letOut = Math.max(0, plant.spoolSpeed) * dt;
  plant.payout += letOut;
  plant.folded = Math.max(0, plant.folded - letOut);
  const A = Math.PI * p.radius ** 2;
  const drag = (2 * p.friction * p.tailWeight * plant.length) / A;
  const reserve = plant.pressure - p.growthYield - drag;
  const free = plant.body.blocked || reserve <= 0 ? 0 : p.growthMobility * reserve;
  const slack = plant.payout - plant.folded - 2 * plant.length;
  const grown = Math.min(free * dt, Math.max(0, slack) / 2);
  plant.length += grown;
  const taut = slack - 2 * grown < 1e-4 && !plant.body.blocked;
  const rest = reserve - grown / dt / p.growthMobility;
  const hold = taut && rest > 0 && plant.length > 0 ? 0.5 * A * rest * Math.exp(-p.friction * state.bend) : 0;
  plant.tension = settle(plant.tension, hold, dt);
};

/** Bend and arm change slowly; walking the whole body every inner step would cost more than it tells. */
const trueState = (plant: Plant): TrueState => {
  const { walked } = plant;
  const fresh =
    walked !== null && Math.abs(walked.length - plant.length) < 0.01 && plant.time - walked.at < 0.1
      ? walked
      : { at: plant.time, length: plant.length, bend: totalBend(plant.body), arm: largestArm(plant.body) };
  plant.walked = fresh;
  return { ...fresh, length: plant.length, pressure: plant.pressure };
};

/** Position and attitude of the camera at the tip: x right, y down, z ahead; quaternion w x y z. */
export const cameraPose = (
  plant: Plant,
): { readonly position: readonly number[]; readonly quaternion: readonly number[] } => {
  const tip = tipOf(plant.body);
  // A folded body throws its tip aside.
  const thrown = Math.min(0.9, plant.folded * 4);
  const yaw = tip.heading + thrown;
  const [cy, sy] = [Math.cos(yaw / 2), Math.sin(yaw / 2)];
  const [cp, sp] = [Math.cos(plant.body.pitch / 2), Math.sin(plant.body.pitch / 2)];
  const [cr, sr] = [Math.cos(plant.roll / 2), Math.sin(plant.roll / 2)];
  // Ry(yaw)·Rx(pitch)·Rz(roll)
  const [w, x, y, z] = [cy * cp, cy * sp, sy * cp, -sy * sp];
  return {
    position: [tip.x, -plant.body.lift, tip.z],
    quaternion: [w * cr - z * sr, x * cr + y * sr, y * cr - x * sr, z * cr + w * sr],
  };
};

const approach = (value: number, target: number, most: number): number =>
  value + Math.max(-most, Math.min(most, target - value));
/** Tension follows within about a twentieth of a second. */
const settle = (value: number, target: number, dt: number): number =>
  value + (target - value) * Math.min(1, dt / 0.05);
