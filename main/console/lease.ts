import { STILL, type Wish } from '../../shared-model/contract/request.ts';

/** How long a renewal keeps the lease alive [s]; the screen renews five times as often. */
export const LEASE_LIFE = 0.25;

/** Hold-to-run (IEC 60204-1): motion lasts only while one client keeps renewing one press. */
export type Lease =
  | { readonly state: 'neutral'; readonly client: string | null; readonly lastPress: number }
  | {
      readonly state: 'held';
      readonly client: string;
      readonly press: number;
      readonly seq: number;
      readonly until: number;
      readonly wish: Wish;
    }
  /** Lapsed or revoked: this client must show a neutral hand before its next press counts. */
  | { readonly state: 'burnt'; readonly client: string; readonly press: number; readonly text: string };

export const NEUTRAL_LEASE: Lease = { state: 'neutral', client: null, lastPress: 0 };

export interface Renewal {
  readonly client: string;
  readonly press: number;
  readonly seq: number;
  readonly wish: Wish;
}

/**
 * Takes a press or its renewal at `now` [s]. Only the next renewal of the living press extends it: an old, doubled or
 * late one never does, and a lapsed lease burns first, however many renewals wait behind it.
 */
export const renewLease = (before: Lease, renewal: Renewal, now: number): Lease => {
  const lease = expireLease(before, now);
  const { client, press, seq, wish } = renewal;
  if (lease.state === 'burnt') return lease;
  if (lease.state === 'neutral') {
    const fresh = seq === 0 && (client !== lease.client || press > lease.lastPress);
    return fresh ? { state: 'held', client, press, seq, until: now + LEASE_LIFE, wish } : lease;
  }
  if (client !== lease.client) return lease;
  if (press > lease.press) return burn(lease, 'A second press began before the first was released.');
  if (press < lease.press || seq <= lease.seq) return lease;
  return { ...lease, seq, wish, until: now + LEASE_LIFE };
};

/** The client's hand is neutral. `press` is its newest press, so that a late release cannot end a newer one. */
export const releaseLease = (lease: Lease, client: string, press: number): Lease => {
  if (lease.state === 'neutral' || client !== lease.client || press < lease.press) return lease;
  return { state: 'neutral', client, lastPress: press };
};

export const expireLease = (lease: Lease, now: number): Lease =>
  lease.state === 'held' && !(now < lease.until)
    ? burn(lease, 'The signal of the held control came too late.')
    : lease;

/** Ends a held lease for a reason other than the hand: Stop, a lost link, another driver. */
export const revokeLease = (lease: Lease, text: string): Lease =>
  lease.state === 'held' ? burn(lease, text) : lease;

/** What is asked for at `now`; STILL unless the lease lives. */
export const wishOf = (lease: Lease, now: number): Wish =>
  lease.state === 'held' && now < lease.until ? lease.wish : STILL;

const burn = (lease: Extract<Lease, { state: 'held' }>, text: string): Lease => ({
  state: 'burnt',
  client: lease.client,
  press: lease.press,
  text: `${text} Let go of every control, then press again.`,
});
