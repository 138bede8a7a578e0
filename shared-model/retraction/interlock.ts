/** Setpoints for one tick. `null` leaves the rig's present setpoint as it is. SI. */
export interface Setpoints {
  /** Tail speed at the spool, + lets out [m/s]. */
  readonly spoolSpeed: number;
  /** Tip speed of the retractor, + inverts [m/s]; null when the rig has none. */
  readonly retractorSpeed: number | null;
  /** [Pa gauge] */
  readonly bodyPressure: number | null;
  /** [Pa gauge], one a muscle. */
  readonly musclePressures: readonly number[] | null;
  /** Tip retractor engaged; null when the rig has no such output. */
  readonly retractorGrip: boolean | null;
}

/**
 * The only thing that the rig link writes to a motor. Made by this file alone, for one tick: a look-alike object does
 * not compile, and a structured clone or a cast fails `isPermit` when it comes to the bytes.
 */
export class PermittedDrive {
  readonly #setpoints: Setpoints;
  readonly #issuedAt: number;

  private constructor(setpoints: Setpoints, issuedAt: number) {
    this.#setpoints = setpoints;
    this.#issuedAt = issuedAt;
  }

  /** True only for objects this class made. */
  static isPermit(candidate: unknown): candidate is PermittedDrive {
    return typeof candidate === 'object' && candidate !== null && #setpoints in candidate;
  }

  get setpoints(): Setpoints {
    return this.#setpoints;
  }

  /** Monotonic time of the judgement [s]. */
  get issuedAt(): number {
    return this.#issuedAt;
  }

  /** Zero speeds and nothing else: always allowed, needs no verdict. */
  static holdStill(now: number, hasRetractor: boolean): PermittedDrive {
    return new PermittedDrive(
      {
        spoolSpeed: 0,
        retractorSpeed: hasRetractor ? 0 : null,
        bodyPressure: null,
        musclePressures: null,
        retractorGrip: null,
      },
      now,
    );
  }
}

/** How long a permit may wait before its bytes are sent [s]: one tick at 20 Hz and some. */
export const PERMIT_LIFE = 0.1;
