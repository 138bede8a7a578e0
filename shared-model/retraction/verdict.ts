/** Why something is not permitted, said to a person, with what would change it. */
export interface Reason {
  readonly code: string;
  readonly text: string;
  readonly remedy: string;
}

/** A wish that was not granted. */
export interface Refusal {
  readonly motion: 'grow' | 'retract' | 'backtrack' | 'steer' | 'pressure';
  readonly reasons: readonly Reason[];
}

/** Forces at one body length. All in N but the ratio and the length [m]. */
export interface ForcesAt {
  readonly length: number;
  /** Tail tension at the tip that inverts it. */
  readonly tipTension: number;
  /** What that takes at the base. */
  readonly baseTension: number;
  /** Load F_c at which the body buckles as a column. */
  readonly columnLoad: number;
  /** Largest distance of a section from the tip's tangent line [m]. */
  readonly arm: number;
  /** Load F_b at which the body folds, column and bending together. */
  readonly capacity: number;
  /** capacity / baseTension. */
  readonly ratio: number;
}

/** Something that would make the way back safe, worked out. */
export interface Remedy {
  readonly kind: 'tip-retractor' | 'body-pressure' | 'straighten' | 'shorter';
  /** A sentence with numbers, and the same in two or three words: what to do, and what it gives. */
  readonly text: string;
  readonly label: string;
  readonly effect: string;
  /** The ratio it would give, or null where none applies. */
  readonly ratio: number | null;
  /** Body pressure [Pa], length to straighten [m], or longest length [m]. */
  readonly value: number | null;
}

/** The verdict on pulling the tail back from here to the base (or to the target). */
export type WayBack =
  | {
      readonly kind: 'clear';
      readonly here: ForcesAt;
      readonly worst: ForcesAt;
      readonly margin: number;
      readonly text: string;
    }
  | {
      readonly kind: 'would-buckle';
      readonly here: ForcesAt;
      readonly worst: ForcesAt;
      readonly margin: number;
      readonly text: string;
      readonly remedies: readonly Remedy[];
    }
  | {
      readonly kind: 'by-tip-retractor';
      readonly here: ForcesAt;
      /** Tension still held at the base and the most that the body bears with margin [N]. */
      readonly held: number;
      readonly heldMax: number;
      readonly margin: number;
      readonly text: string;
    }
  | { readonly kind: 'cannot-judge'; readonly reasons: readonly Reason[]; readonly text: string };
