import { LEASE_LIFE } from '../../main/console/lease.ts';
import type { Fault } from '../../main/simulator/built-in-rig.ts';
import { createRandom, type Random } from '../../main/simulator/random.ts';
import { STILL, type Wish } from '../../shared-model/contract/request.ts';
import { type Bench, startBench } from '../main/console/a-console.ts';
import { badLine } from './bad-line.ts';

/** Times after which nothing may move until a person presses afresh, and what was moved all the same. */
export interface FaultRun {
  readonly seed: number;
  readonly violations: readonly string[];
  readonly motionWrites: number;
  readonly linkLosses: number;
}

const FAULTS: readonly Fault[] = [
  'unplug',
  'dead-unit',
  'bit-errors',
  'delayed',
  'stuck-pressure',
  'leak',
  'motor-stall',
  'retractor-loss',
  'retractor-stall',
  'emergency-stop',
];
const MOTIONS: readonly Wish['motion'][] = [
  { kind: 'grow' },
  { kind: 'grow' },
  { kind: 'grow' },
  { kind: 'retract' },
  { kind: 'backtrack', target: 'nothing' },
  { kind: 'still' },
];

/** One transaction and its gaps: what is on the wire already cannot be called back [s]. */
const TRANSACTION = 0.015;
const TICK = 0.05;
const STEPS = 24;

/** What the operator of one run has done, as far as it says when something may move. */
interface Hand {
  press: number;
  aliveUntil: number;
  /** Before this nothing may move but by a press that began after it. */
  disarmedAt: number;
  pressedAt: number;
}

/**
 * A console on the built-in rig in virtual time, with a bad line between them, faults of the machine, and an operator who
 * presses, renews late and twice, lets go, stops and is unplugged, all by one seed. A recorder at the wire holds it to its
 * invariants.
 */
export const runFaults = async (seed: number): Promise<FaultRun> => {
  const random = createRandom(seed);
  const bench = await startBench(seed, { wrap: badLine(random, 0.12 * random.uniform()) });
  bench.console_.join('watcher');
  const hand: Hand = { press: 0, aliveUntil: -1, disarmedAt: -1, pressedAt: -1 };
  const violations: string[] = [];
  let checked = 0;
  let losses = 0;
  const check = (): void => {
    const { link } = bench.frame();
    for (; checked < bench.wire.length; checked++) {
      const { at, spool, retractor } = bench.wire[checked]!;
      if (spool === 0 && retractor === 0) continue;
      if (at > hand.aliveUntil + TICK)
        violations.push(
          `moved ${(at - hand.aliveUntil).toFixed(3)} s after the lease ended, at ${at.toFixed(2)} s`,
        );
      if (hand.pressedAt < hand.disarmedAt && at > hand.disarmedAt + TRANSACTION)
        violations.push(`moved at ${at.toFixed(2)} s, disarmed since ${hand.disarmedAt.toFixed(2)} s`);
    }
    if (link.state === 'lost' && (link.text === '' || link.remedy === ''))
      violations.push('lost without a reason');
  };
  for (let step = 0; step < STEPS; step++) {
    await act(bench, random, hand, check);
    check();
  }
  bench.rig.fault('none');
  await bench.console_.request('driver', { kind: 'release', press: hand.press });
  const ended = bench.clock.now();
  await bench.run(1.5);
  for (const { at, spool, retractor } of bench.wire)
    if (at > ended + TRANSACTION && (spool !== 0 || retractor !== 0))
      violations.push(`moved at rest, at ${at.toFixed(2)} s`);
  losses = bench.events.filter((event) => event.kind === 'link' && event.state === 'lost').length;
  violations.push(...implausible(bench));
  if (bench.rig.truth().folded > 0) violations.push('folded the body');
  const motionWrites = bench.wire.filter(({ spool, retractor }) => spool !== 0 || retractor !== 0).length;
  await bench.close();
  return { seed, violations, motionWrites, linkLosses: losses };
};

/** One thing that happens. */
const act = async (bench: Bench, random: Random, hand: Hand, check: () => void): Promise<void> => {
  const pick = random.uniform();
  if (pick < 0.55) return holdFor(bench, random, hand, check);
  if (pick < 0.7) {
    bench.rig.fault(FAULTS[Math.floor(random.uniform() * FAULTS.length)]!);
    if (random.uniform() < 0.7) await bench.run(random.uniform());
    if (random.uniform() < 0.8) bench.rig.fault('none');
    return;
  }
  if (pick < 0.78) {
    await bench.console_.request('watcher', { kind: 'stop' });
    hand.disarmedAt = bench.clock.now();
  } else if (pick < 0.86)
    await bench.console_.request('driver', {
      kind: 'set-tip-retractor',
      attached: random.uniform() < 0.5,
      confirmed: true,
    });
  else if (pick < 0.92) await bench.console_.request('driver', { kind: 'reconnect' });
  await bench.run(0.6 * random.uniform());
};

/** A press with renewals that are now and then late, old or doubled, and a release that is now and then forgotten. */
const holdFor = async (bench: Bench, random: Random, hand: Hand, check: () => void): Promise<void> => {
  hand.press++;
  const wish: Wish = {
    ...STILL,
    motion: MOTIONS[Math.floor(random.uniform() * MOTIONS.length)]!,
    tipSpeed: 0.25 * random.uniform(),
    steer: random.uniform() < 0.2 ? { kind: 'bend', right: 2 * random.uniform() - 1, down: 0 } : null,
  };
  const renewals = Math.floor(40 * random.uniform());
  let newest = -1;
  for (let seq = 0; seq <= renewals; seq++) {
    // Never 0 again, which would be a press of its own.
    const sent = seq > 0 && random.uniform() < 0.05 ? Math.max(1, seq - 2) : seq;
    const asked = bench.clock.now();
    const fresh = seq === 0;
    if (random.uniform() > 0.04) {
      const answer = await bench.console_.request('driver', {
        kind: 'hold',
        press: hand.press,
        seq: sent,
        wish,
      });
      // An old one is answered, but extends nothing.
      if (answer.ok && sent > newest) {
        newest = sent;
        hand.aliveUntil = asked + LEASE_LIFE;
      }
      if (answer.ok && fresh) hand.pressedAt = asked;
    }
    await bench.run(random.uniform() < 0.03 ? 0.4 : 0.05);
    check();
    // The line went and came back under the press: it must not go on.
    const { link, at } = bench.frame();
    if (link.state !== 'open' && at >= hand.pressedAt) hand.disarmedAt = bench.clock.now();
  }
  if (random.uniform() < 0.85) await bench.console_.request('driver', { kind: 'release', press: hand.press });
};

/** Readings that cannot be of their own signal: the encoder's is known to within what it moves while a reading is fresh. */
const implausible = (bench: Bench): string[] => {
  const { readings } = bench.frame();
  const found: string[] = [];
  const good = (name: keyof typeof readings): number | undefined => {
    const reading = readings[name];
    return reading?.quality === 'good' ? reading.value : undefined;
  };
  const payout = good('tail_payout');
  if (payout !== undefined && Math.abs(payout - bench.rig.truth().payout) > 0.3)
    found.push(`payout reads ${payout}`);
  const pressure = good('body_pressure');
  if (pressure !== undefined && !(pressure > -100 && pressure < 16_000))
    found.push(`pressure reads ${pressure}`);
  const roll = good('tip_roll');
  if (roll !== undefined && Math.abs(roll) > 0.1) found.push(`roll reads ${roll}`);
  const stop = good('emergency_stop');
  if (stop !== undefined && stop !== 0 && stop !== 1) found.push(`emergency stop reads ${stop}`);
  return found;
};
