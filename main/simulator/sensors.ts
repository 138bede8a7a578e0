import type { ReadSignal } from '../../shared-model/contract/reading.ts';
import type { PlantParameters } from './parameters.ts';
import { cameraPose, type Plant } from './plant.ts';
import type { Random } from './random.ts';

/** Noise of one standard deviation, SI. */
const NOISE = { pressure: 8, tension: 0.04, muscle: 25, roll: 0.002 };
/** Tail let out per encoder count [m]. */
const COUNT = 0.0002;

/** What the machine's sensors say of the plant now, SI. `frozenPressure` replaces a stuck sensor's value. */
export const senseAll = (
  plant: Plant,
  p: PlantParameters,
  random: Random,
  frozenPressure: number | null,
): Partial<Record<ReadSignal, number>> => {
  const { position, quaternion } = cameraPose(plant);
  const values: Partial<Record<ReadSignal, number>> = {
    body_pressure: frozenPressure ?? plant.pressure + NOISE.pressure * random.normal(),
    tail_tension: plant.tension + NOISE.tension * random.normal(),
    tail_payout: counted(plant.payout * p.encoderScale),
    tip_retractor_attached: plant.gripped ? 1 : 0,
    tip_retractor_travel: counted(plant.travel * p.travelScale),
    tip_roll: plant.roll + NOISE.roll * random.normal(),
    emergency_stop: plant.faults.emergencyStop ? 1 : 0,
    camera_x: position[0]!,
    camera_y: position[1]!,
    camera_z: position[2]!,
    camera_qw: quaternion[0]!,
    camera_qx: quaternion[1]!,
    camera_qy: quaternion[2]!,
    camera_qz: quaternion[3]!,
  };
  plant.musclePressures.forEach((pressure, i) => {
    values[`muscle_${i + 1}_pressure` as ReadSignal] = pressure + NOISE.muscle * random.normal();
  });
  return values;
};

const counted = (metres: number): number => Math.floor(metres / COUNT) * COUNT;
