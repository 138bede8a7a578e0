import type { ProcedureStep, TipRetractorStatus } from '../../shared-model/contract/frame.ts';
import { goodValue, type Readings } from '../../shared-model/contract/reading.ts';
import type { WayBack } from '../../shared-model/retraction/verdict.ts';

/** What the console holds true of the tip retractor between ticks. */
export interface TipRetractor {
  readonly source: 'sensed' | 'declared';
  /** Last command to the grip; null until a person gave one. */
  readonly commanded: boolean | null;
  /** What a person declared where the rig cannot sense it. */
  readonly declared: boolean;
  /** When it was last commanded or declared, monotonic [s]. */
  readonly since: number | null;
}

export const createTipRetractor = (sensed: boolean): TipRetractor => ({
  source: sensed ? 'sensed' : 'declared',
  commanded: null,
  declared: false,
  since: null,
});

/** Attached only where a fresh flag says so, or, without a flag, where a person declared it. */
export const retractorState = (
  retractor: TipRetractor,
  readings: Readings,
  now: number,
  readingAge: number,
): TipRetractorStatus['state'] => {
  if (retractor.source === 'declared') return retractor.declared ? 'attached' : 'absent';
  const flag = goodValue(readings.tip_retractor_attached, now, readingAge);
  if (flag === undefined) return 'unknown';
  if (flag === 1) return retractor.commanded === false ? 'releasing' : 'attached';
  return retractor.commanded === true ? 'engaging' : 'absent';
};

/** The state with the steps of the procedure that it stands in. */
export const retractorStatus = (
  retractor: TipRetractor,
  state: TipRetractorStatus['state'],
  wayBack: WayBack,
  now: number,
): TipRetractorStatus => ({
  source: retractor.source,
  state,
  since: retractor.since,
  steps: stepsOf(retractor, state, wayBack, now),
});

/** Longer than this no grip takes hold or lets go [s]. */
const PATIENCE = 6;

const stepsOf = (
  { commanded, since, source }: TipRetractor,
  state: TipRetractorStatus['state'],
  wayBack: WayBack,
  now: number,
): ProcedureStep[] => {
  const late = since !== null && now - since > PATIENCE;
  if (state === 'releasing')
    return [
      { text: 'All holds still', state: 'done' },
      { text: late ? 'It does not let go; look at it' : 'It lets go', state: late ? 'failed' : 'now' },
    ];
  const asked = commanded === true || state === 'attached';
  if (!asked) return [];
  const grips = state === 'attached';
  const grip = source === 'sensed' ? 'It grips, says the rig' : 'It grips, on your word';
  const unread = state === 'unknown' ? 'Its flag cannot be read' : 'It does not grip; look at it';
  return [
    { text: 'All holds still', state: 'done' },
    grips || !late ? { text: grip, state: grips ? 'done' : 'now' } : { text: unread, state: 'failed' },
    {
      text: easedText(wayBack),
      state: !grips ? 'open' : wayBack.kind === 'by-tip-retractor' ? 'done' : 'now',
    },
  ];
};

const easedText = (wayBack: WayBack): string =>
  wayBack.kind === 'cannot-judge' && wayBack.reasons.some((reason) => reason.code === 'held-tension')
    ? 'Hold Grow to ease the spool off'
    : 'The spool has eased off';
