import type { Limits } from '../../shared-model/body/body.ts';
import type { LinkStatus, RecordingStatus } from '../../shared-model/contract/frame.ts';
import type { Readings } from '../../shared-model/contract/reading.ts';
import type { Trip } from '../../shared-model/retraction/pull-watch.ts';
import type { AlarmDefinition, Condition } from './alarms.ts';

/** Every alarm of the console: what follows from it and what to do. Kept as a table so that the manual can print it. */
export const ALARMS = {
  link: {
    id: 'link-lost',
    priority: 'high',
    consequence: 'Nothing can be driven or read; the base stops by its own watchdog.',
    action: 'See Link for the cause. After reconnection press afresh.',
    onDelay: 0.3,
    offDelay: 1,
  },
  emergencyStop: {
    id: 'emergency-stop',
    priority: 'high',
    consequence: 'All motion is refused.',
    action: 'Find out why it was pressed; release it at the rig.',
    onDelay: 0,
    offDelay: 1,
  },
  emergencyStopUnread: {
    id: 'emergency-stop-unread',
    priority: 'high',
    consequence: 'All motion is refused, as if it were pressed.',
    action: 'Check its line; the Rig tab says what is read.',
    onDelay: 0.5,
    offDelay: 1,
  },
  pressureHigh: {
    id: 'pressure-high',
    priority: 'high',
    consequence: 'The wall or a seam may burst.',
    action: 'Hold still and lower body pressure. Check the relief valve.',
    onDelay: 0.3,
    offDelay: 2,
  },
  tensionHigh: {
    id: 'tension-high',
    priority: 'high',
    consequence: 'The body may fold, or the tail tear.',
    action: 'Hold still; lower body pressure.',
    onDelay: 0.2,
    offDelay: 2,
  },
  foldSuspected: {
    id: 'fold-suspected',
    priority: 'high',
    consequence: 'The tip may be anywhere; body length is not to be relied on. Pulling is refused.',
    action:
      'Hold still and look at the picture. Lower body pressure slowly. On Drive, say so once the body lies as before.',
    onDelay: 0,
    offDelay: 0,
  },
  spoolDrive: {
    id: 'spool-drive',
    priority: 'medium',
    consequence: 'The press was ended; tail and tip stand.',
    action: 'Check the spool motor, its brake and the encoder; then press again.',
    onDelay: 0,
    offDelay: 0,
  },
  retractorDrive: {
    id: 'retractor-drive',
    priority: 'medium',
    consequence: 'The press was ended; tail and tip stand.',
    action: 'Check the tip retractor; then press again.',
    onDelay: 0,
    offDelay: 0,
  },
  signalBad: {
    id: 'signal-bad',
    priority: 'medium',
    consequence: 'Motion that needs the signal is refused.',
    action: 'Check the sensor and its line on the Rig tab.',
    onDelay: 0.5,
    offDelay: 2,
  },
  recording: {
    id: 'recording-failed',
    priority: 'medium',
    consequence: 'Driving goes on; what happens now is kept in memory only.',
    action: 'Free the disk or choose another folder; nothing written is lost.',
    onDelay: 0,
    offDelay: 2,
  },
} as const satisfies Record<string, AlarmDefinition>;

export interface AlarmInputs {
  readonly link: LinkStatus;
  readonly readings: Readings;
  readonly limits: Limits;
  readonly emergencyStopWired: boolean;
  readonly recording: RecordingStatus;
  readonly watch: { readonly trip: Trip | null; readonly foldSuspected: Trip | null };
}

/** The conditions that hold now. A reading that is not good counts as bad, never as normal. */
export const alarmConditions = (inputs: AlarmInputs): Condition[] => {
  const { link, readings, limits, recording } = inputs;
  const conditions: Condition[] = [];
  if (recording.state === 'failed') conditions.push({ ...ALARMS.recording, cause: recording.text });
  if (link.state !== 'open') {
    const cause = link.state === 'lost' ? link.text : `The line to ${link.port} is not open.`;
    return [...conditions, { ...ALARMS.link, cause }];
  }
  if (inputs.emergencyStopWired) {
    const stop = readings.emergency_stop;
    if (stop?.quality !== 'good')
      conditions.push({ ...ALARMS.emergencyStopUnread, cause: 'The wired emergency stop cannot be read.' });
    else if (stop.value !== 0)
      conditions.push({ ...ALARMS.emergencyStop, cause: 'The wired emergency stop is pressed.' });
  }
  const { trip, foldSuspected } = inputs.watch;
  if (foldSuspected !== null) conditions.push({ ...ALARMS.foldSuspected, cause: foldSuspected.text });
  if (trip?.code === 'spool-drive') conditions.push({ ...ALARMS.spoolDrive, cause: trip.text });
  if (trip?.code === 'retractor-drive') conditions.push({ ...ALARMS.retractorDrive, cause: trip.text });
  const pressure = readings.body_pressure;
  if (pressure?.quality === 'good' && !(pressure.value <= 1.1 * limits.bodyPressureMax))
    conditions.push({
      ...ALARMS.pressureHigh,
      cause: `Body pressure ${(pressure.value / 1000).toFixed(1)} kPa, limit ${(limits.bodyPressureMax / 1000).toFixed(1)} kPa.`,
    });
  const tension = readings.tail_tension;
  if (tension?.quality === 'good' && !(tension.value <= limits.tailTensionMax))
    conditions.push({
      ...ALARMS.tensionHigh,
      cause: `Tail tension ${tension.value.toFixed(0)} N, limit ${limits.tailTensionMax.toFixed(0)} N.`,
    });
  const bad = Object.entries(readings).flatMap(([name, reading]) =>
    reading.quality === 'good'
      ? []
      : [`${name.replaceAll('_', ' ')} (${reading.quality === 'bad' ? reading.why : 'stale'})`],
  );
  if (bad.length > 0)
    conditions.push({ ...ALARMS.signalBad, cause: `No good reading of ${bad.join(', ')}.` });
  return conditions;
};
