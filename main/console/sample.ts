import type { EstimateFrame } from '../../shared-model/contract/frame.ts';
import type { Readings } from '../../shared-model/contract/reading.ts';
import type { Wish } from '../../shared-model/contract/request.ts';
import type { Judgement } from '../../shared-model/retraction/interlock.ts';
import type { WayBack } from '../../shared-model/retraction/verdict.ts';
import type { ReadingsSample } from '../record/recorder.ts';
import { askedSpeed } from './hold-status.ts';

/** One tick for the readings channel of the record: good values as numbers, the others by name. */
export const sampleOf = (tick: {
  readonly readings: Readings;
  readonly estimate: EstimateFrame | null;
  readonly wayBack: WayBack;
  readonly wish: Wish;
  readonly judged: Judgement;
  readonly now: number;
}): ReadingsSample => {
  const { readings, estimate, wayBack, wish, judged, now } = tick;
  const entries = Object.entries(readings);
  const ratio =
    wayBack.kind === 'clear' || wayBack.kind === 'would-buckle' ? wayBack.worst.ratio : Number.NaN;
  return {
    at: now,
    values: Object.fromEntries(
      entries.flatMap(([name, reading]) => (reading.quality === 'good' ? [[name, reading.value]] : [])),
    ),
    bad: entries.flatMap(([name, reading]) => (reading.quality === 'good' ? [] : [name])),
    length: estimate?.length ?? null,
    ratio: Number.isFinite(ratio) ? ratio : null,
    asked: askedSpeed(wish),
    permitted: judged.tipSpeed,
  };
};
