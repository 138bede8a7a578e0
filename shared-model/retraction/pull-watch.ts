/** What is followed from tick to tick while tail and tip are driven. SI. */
export interface PullWatch {
  /** What stopped the last press, until the next one; null while nothing did. */
  readonly trip: Trip | null;
  /** A fold of the body is suspected until a person says that it lies as before. */
  readonly foldSuspected: Trip | null;
  readonly payout: number | null;
  readonly travel: number | null;
  readonly at: number;
  /** What the drives of tail and tip were told and did of late. */
  readonly spool: Followed;
  readonly tip: Followed;
  /** Tail taken in at less tension than turning a tip takes, since one last turned [m]; whether the tail was taut before. */
  readonly takenLoose: number;
  readonly taut: boolean;
  /** Tail that was let out without tension since it was last taut: the tip did not take it [m]. */
  readonly loose: number;
}

/** Way told and way gone in one direction, what lies back being forgotten little by little [m]. */
export interface Followed {
  readonly told: number;
  readonly gone: number;
}
const NOTHING_TOLD: Followed = { told: 0, gone: 0 };

export interface Trip {
  readonly code: 'spool-drive' | 'retractor-drive' | 'suspected-fold';
  readonly text: string;
  readonly remedy: string;
}

/** What one tick saw. Undefined: no good reading. */
export interface WatchedTick {
  readonly now: number;
  /** Speeds that were permitted in the last tick: of tail (+ lets out) and of the retractor's tip (+ inverts). */
  readonly spoolSpeed: number;
  readonly retractorSpeed: number;
  readonly payout: number | undefined;
  readonly travel: number | undefined;
  readonly tension: number | undefined;
  /** The retractor grips, so tension tells nothing of the tip. */
  readonly gripped: boolean;
  /** PA/2 at the low end of the pressure's band: turning a tip takes at least that, friction and losses aside. */
  readonly losslessTension: number;
  /** Estimated body length, and the length of a body too short to fold. */
  readonly length: number;
  readonly shortLength: number;
  /** Loose tail that the rig allows [m]: so much may come in before a tail that was loose is taut. */
  readonly slackMax: number;
}

export const WATCHING: PullWatch = {
  trip: null,
  foldSuspected: null,
  payout: null,
  travel: null,
  at: Number.NaN,
  spool: NOTHING_TOLD,
  tip: NOTHING_TOLD,
  takenLoose: 0,
  taut: false,
  loose: 0,
};

/** Judged after so long at the speed told, so that a drive may start up [s], and over at least this way [m]. */
const START_UP = 1;
const LEAST_WAY = 0.002;
/** A drive that went less than this share of what it was told does not follow. */
const FOLLOWS_SHARE = 0.4;
/** What lies further back than this is forgotten [s]. */
const MEMORY = 4;
/** Of the lossless tension: below the first the tip cannot be turning, above the second it is. */
const LOOSE_SHARE = 0.6;
const TURNING_SHARE = 0.8;
/** A tail that holds this much at rest is taut. */
const TAUT_SHARE = 0.3;
/** A tail that holds less than this is not drawn by the tip. */
const SLACK_SHARE = 0.02;
/** Tail that may come in loose once it was taut [m], and beyond what may lie loose when it was not. */
const LOOSE_MAX = 0.03;

/** One tick of the watch; a drive that does not follow, or tail that comes too easily, trips it. */
export const stepWatch = (before: PullWatch, tick: WatchedTick): PullWatch => {
  const dt = tick.now - before.at;
  const next = { ...before, payout: tick.payout ?? null, travel: tick.travel ?? null, at: tick.now };
  const moved = (now: number | undefined, was: number | null): number | null =>
    now === undefined || was === null || !(dt > 0) ? null : now - was;
  const paidOut = moved(tick.payout, before.payout);
  const travelled = moved(tick.travel, before.travel);
  const spool = follow(before.spool, tick.spoolSpeed, paidOut, dt);
  const tip = tick.gripped ? follow(before.tip, tick.retractorSpeed, travelled, dt) : NOTHING_TOLD;
  const loose = stepLoose(before, tick, paidOut);
  const suspected =
    before.foldSuspected ??
    (loose.takenLoose > LOOSE_MAX + (loose.taut ? 0 : tick.slackMax) ? foldOf(tick, loose.takenLoose) : null);
  return {
    ...next,
    ...loose,
    spool,
    tip,
    loose: stepSlack(before.loose, tick, paidOut),
    foldSuspected: suspected,
    trip:
      before.trip ??
      (lags(spool, tick.spoolSpeed) ? spoolTrip(tick) : null) ??
      (lags(tip, tick.retractorSpeed) ? RETRACTOR_TRIP : null) ??
      (before.foldSuspected === null ? suspected : null),
  };
};

/** A fresh press tries again; a suspected fold stays, and so does what came in loose, or short pulls would creep past it. */
export const rearmWatch = (watch: PullWatch): PullWatch => ({
  ...watch,
  trip: null,
  spool: NOTHING_TOLD,
  tip: NOTHING_TOLD,
});

/** A person looked and says that the body lies as before. */
export const clearFold = (watch: PullWatch): PullWatch => ({
  ...rearmWatch(watch),
  foldSuspected: null,
  takenLoose: 0,
});

const follow = (before: Followed, speed: number, moved: number | null, dt: number): Followed => {
  if (speed === 0 || moved === null || !Number.isFinite(moved)) return NOTHING_TOLD;
  const kept = Math.max(0, 1 - dt / MEMORY);
  return {
    told: kept * before.told + Math.abs(speed) * dt,
    gone: kept * before.gone + Math.sign(speed) * moved,
  };
};

const lags = ({ told, gone }: Followed, speed: number): boolean =>
  told >= Math.max(LEAST_WAY, START_UP * Math.abs(speed)) && !(gone >= FOLLOWS_SHARE * told);

/**
 * Tail that comes in at less than a tip can turn with: it was loose, or the spool turns under it, or the body folds. Only
 * a pull from the base of a body that is long enough to fold tells, and only where tension is measured.
 */
const stepLoose = (
  { takenLoose, taut, loose }: PullWatch,
  tick: WatchedTick,
  paidOut: number | null,
): Pick<PullWatch, 'takenLoose' | 'taut'> => {
  const { tension, losslessTension: least } = tick;
  const pulling = tick.spoolSpeed < 0 && !tick.gripped;
  if (tension === undefined || !pulling)
    return {
      // Only tail that is let out again makes up for it.
      takenLoose: tension === undefined ? 0 : Math.max(0, takenLoose - Math.max(0, paidOut ?? 0)),
      taut: tension !== undefined && !tick.gripped && tension >= TAUT_SHARE * least,
    };
  if (paidOut === null || tick.length <= tick.shortLength) return { takenLoose, taut };
  if (tension >= TURNING_SHARE * least) return { takenLoose: 0, taut: true };
  // What is known to lie loose comes in first.
  if (loose > 0) return { takenLoose: 0, taut };
  return { takenLoose: tension < LOOSE_SHARE * least ? takenLoose + Math.max(0, -paidOut) : 0, taut };
};

/** Tail let out that the tip does not draw lies loose: it is blocked, or pressure is short. Taut again, none does. */
const stepSlack = (before: number, tick: WatchedTick, paidOut: number | null): number => {
  const { tension, losslessTension: least } = tick;
  if (tension === undefined || !(tension < TAUT_SHARE * least)) return 0;
  if (tick.gripped || paidOut === null || !(tension < SLACK_SHARE * least)) return before;
  return Math.max(0, before + paidOut);
};

const foldOf = ({ tension = 0, losslessTension }: WatchedTick, takenLoose: number): Trip => ({
  code: 'suspected-fold',
  text: `${takenLoose.toFixed(2)} m of tail came in at ${tension.toFixed(0)} N, and a tip takes at least ${losslessTension.toFixed(0)} N to turn: the body folds, or the tail was loose or slips on the spool.`,
  remedy: 'Hold still and look at the picture. Lower body pressure slowly to take the load off. Do not pull.',
});

const spoolTrip = ({ spoolSpeed }: WatchedTick): Trip => ({
  code: 'spool-drive',
  text: `The tail does not follow the spool, which was told ${Math.abs(spoolSpeed).toFixed(2)} m/s.`,
  remedy: 'Check the spool motor, its brake and the encoder; then press again.',
});

const RETRACTOR_TRIP: Trip = {
  code: 'retractor-drive',
  text: 'The tip retractor does not move as it was told.',
  remedy: 'Check the tip retractor; hold still. Press again to try once more.',
};
