import { describe, expect, it } from 'vitest';
import { judgeWayBack } from '../../../shared-model/retraction/judge.ts';
import { solveCase } from '../../../shared-model/retraction/solve-case.ts';
import { bodyB, straight, wayBackInput } from './way-back-input.ts';

const judged = (length: number, body = bodyB) => {
  const verdict = judgeWayBack(wayBackInput(straight(length), { body }));
  if (verdict.kind !== 'clear' && verdict.kind !== 'would-buckle') throw new Error(verdict.text);
  return verdict;
};

// Beam theory of thin tubes: at least five radii long, wall at most a tenth of the radius (design values).
describe('where the theory ends', () => {
  it('a body shorter than five radii bears no more than one of five, and the verdict says so', () => {
    const [short, five] = [judged(0.08), judged(0.2)];
    expect(short.here.columnLoad).toBeCloseTo(five.here.columnLoad, 9);
    expect(short.text).toContain('shorter than 5 radii');
    expect(five.text).not.toContain('Beyond the theory');
  });

  it('a body of no length still cannot buckle', () => {
    expect(judged(0).kind).toBe('clear');
    expect(judged(0).text).not.toContain('Beyond');
  });

  it('a wall thicker than a tenth of the radius wants a margin of 1.5, and the verdict says so', () => {
    const thick = { ...bodyB, wall: 0.0041, E: 2.4e6, G: 0.85e6 };
    expect(judged(0.3, thick).margin).toBe(1.5);
    expect(judged(0.3, thick).text).toContain('thicker than a 10th');
    expect(judged(0.3, { ...thick, wall: 0.004 }).margin).toBe(1.25);
    // Membrane stiffnesses say nothing of a thickness.
    expect(judged(0.3, { ...bodyB, wall: 1, E: 30_000, G: 1000 }).margin).toBe(1.25);
  });

  it('a planning case keeps the bare formula and says where it is stretched', () => {
    const solved = solveCase({
      id: 1,
      body: { radius: 0.04, wall: 50e-6, E: 200e6, G: 70e6 },
      pressure: 10_000,
      segments: [{ length: 0.08, curvature: 0, plane: 0 }],
    });
    expect(solved.reason).toContain('shorter than 5 radii');
  });
});
