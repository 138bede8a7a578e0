import type { TipRetractorStatus } from '../../shared-model/contract/frame.ts';
import { goodValue, type Readings } from '../../shared-model/contract/reading.ts';

/** What the console holds true of the tip retractor between ticks. */
export interface TipRetractor {
  readonly source: 'sensed' | 'declared';
  /** Last command to the grip; null until a person gave one. */
  readonly commanded: boolean | null;
  /** What a person declared where the rig cannot sense it. */
  readonly declared: boolean;
}

export const createTipRetractor = (sensed: boolean): TipRetractor => ({
  source: sensed ? 'sensed' : 'declared',
  commanded: null,
  declared: false,
});

/** Attached only where a fresh flag says so, or, without a flag, where a person declared it. */
export const retractorStatus = (
  retractor: TipRetractor,
  readings: Readings,
  now: number,
  readingAge: number,
): TipRetractorStatus => {
  if (retractor.source === 'declared')
    return { source: 'declared', state: retractor.declared ? 'attached' : 'absent' };
  const flag = goodValue(readings.tip_retractor_attached, now, readingAge);
  if (flag === undefined) return { source: 'sensed', state: 'unknown' };
  if (flag === 1)
    return { source: 'sensed', state: retractor.commanded === false ? 'releasing' : 'attached' };
  return { source: 'sensed', state: retractor.commanded === true ? 'engaging' : 'absent' };
};
