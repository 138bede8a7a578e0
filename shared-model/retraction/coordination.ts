/** What the spool may do while the tip retractor inverts. SI. */
export interface Coordination {
  /** Speed wanted of the tip, ≥ 0 [m/s]. */
  readonly speed: number;
  /** Speed at which the tip comes back, as measured [m/s]. */
  readonly tipSpeed: number;
  /** Tail that lies loose, from both encoders: payout − 2 × length [m]. */
  readonly slack: number;
  /** Tension at the spool; undefined where it is not measured. */
  readonly held: number | undefined;
  /** Most that the body bears of it with margin [N]. */
  readonly heldMax: number;
  /** Loose tail above which a loop may form [m]. */
  readonly slackMax: number;
}

/** Loose tail that is left on purpose, so that the spool never pulls against the grip [m]. */
const SLACK_KEPT = 0.05;
/** How fast what lies loose beyond that is taken up [1/s], and at most how much faster than twice the tip wanted. */
const SLACK_GAIN = 1.5;
const TAKE_UP_MAX = 1.5;

/**
 * Speeds of tip (+ inverts) and tail (− takes in) [m/s] of a pull by the tip retractor. The spool follows the tip as it is
 * measured, twice as fast, and never only what the retractor was told: one that stalls must not find the spool pulling. It
 * takes up a little more while too much lies loose, less as the held tension passes half of what the body bears, and the
 * tip waits while a loop could form. Anything not finite holds both.
 */
export const coordinate = (by: Coordination): { readonly tip: number; readonly spool: number } => {
  const { speed, slack, heldMax, slackMax } = by;
  const share = by.held === undefined ? 0 : Math.max(0, by.held) / heldMax;
  const wanted = 2 * Math.max(0, by.tipSpeed) + SLACK_GAIN * (slack - SLACK_KEPT);
  const eased = wanted * Math.min(1, Math.max(0, 2 - 2 * share));
  const spool = -Math.min(2 * TAKE_UP_MAX * speed, Math.max(0, eased));
  if (!(Number.isFinite(spool) && Number.isFinite(slack) && speed >= 0)) return { tip: 0, spool: 0 };
  return { tip: slack <= slackMax ? speed : 0, spool };
};

/** Tail speed at which the spool is eased off against a gripping retractor [m/s]. */
const EASE_SPEED = 0.05;

/**
 * Tail speed that eases a spool which still holds [m/s]: it lets out until half of the loose tail lies there that a loop
 * needs, or the tension is down to a quarter of what the body bears. Zero when there is nothing to ease.
 */
export const easeOff = ({
  slack,
  held,
  heldMax,
  slackMax,
}: Omit<Coordination, 'speed' | 'tipSpeed'>): number =>
  held !== undefined && held > heldMax / 4 && slack < slackMax / 2 ? EASE_SPEED : 0;
