import type { Passage } from '../../shared-model/contract/frame.ts';

/** A point of the floor plan with a heading: direction (sin heading, cos heading) in x, z. */
export interface PlanPose {
  readonly x: number;
  readonly z: number;
  readonly heading: number;
}

interface Piece {
  readonly ax: number;
  readonly az: number;
  readonly dx: number;
  readonly dz: number;
  readonly length: number;
  readonly halfA: number;
  readonly halfB: number;
  readonly heightA: number;
  readonly heightB: number;
  /** Whether the passage ends behind this piece's far end. */
  readonly deadEnd: boolean;
}
export type Walls = readonly Piece[];

/** Steeper than this against a wall the tip does not slide but stands [rad]. */
const END_ON = (60 * Math.PI) / 180;

export const wallsOf = (passages: readonly Passage[]): Walls =>
  passages.flatMap((passage) =>
    passage.centreline.slice(1).map((b, i) => {
      const a = passage.centreline[i]!;
      const dx = b[0] - a[0];
      const dz = b[2] - a[2];
      const length = Math.hypot(dx, dz);
      const last = i === passage.centreline.length - 2;
      const continued = passages.some(
        (other) =>
          other !== passage &&
          Math.hypot(other.centreline[0]![0] - b[0], other.centreline[0]![2] - b[2]) < 1e-6,
      );
      return {
        ax: a[0],
        az: a[2],
        dx: dx / length,
        dz: dz / length,
        length,
        halfA: passage.width[i]! / 2,
        halfB: passage.width[i + 1]! / 2,
        heightA: passage.height[i]!,
        heightB: passage.height[i + 1]!,
        deadEnd: last && !continued,
      };
    }),
  );

interface Nearest {
  readonly piece: Piece;
  readonly clearance: number;
  /** Unit vector towards the middle, and whether the point lies past a dead end. */
  readonly inX: number;
  readonly inZ: number;
  readonly pastEnd: boolean;
  readonly height: number;
}

/** The passage in which the point lies deepest. */
export const nearestPassage = (walls: Walls, x: number, z: number): Nearest => {
  let best: Nearest | null = null;
  for (const piece of walls) {
    const along = (x - piece.ax) * piece.dx + (z - piece.az) * piece.dz;
    const t = Math.min(piece.length, Math.max(0, along));
    const ox = piece.ax + t * piece.dx - x;
    const oz = piece.az + t * piece.dz - z;
    const distance = Math.hypot(ox, oz);
    const share = t / piece.length;
    const clearance = piece.halfA + share * (piece.halfB - piece.halfA) - distance;
    if (best !== null && clearance <= best.clearance) continue;
    best = {
      piece,
      clearance,
      inX: distance > 1e-9 ? ox / distance : 0,
      inZ: distance > 1e-9 ? oz / distance : 0,
      pastEnd: piece.deadEnd && along > piece.length,
      height: piece.heightA + share * (piece.heightB - piece.heightA),
    };
  }
  return best!;
};

/**
 * One step of a body of `radius` along its heading, turned by curvature·ds: free, sliding along a wall, or null where
 * it stands against one.
 */
export const stepAlong = (
  walls: Walls,
  from: PlanPose,
  curvature: number,
  ds: number,
  radius: number,
): PlanPose | null => {
  const heading = from.heading + curvature * ds;
  const x = from.x + ds * Math.sin(heading);
  const z = from.z + ds * Math.cos(heading);
  const here = nearestPassage(walls, x, z);
  if (here.pastEnd) return null;
  if (here.clearance >= radius) return { x, z, heading };
  const wall = Math.atan2(here.piece.dx, here.piece.dz);
  const off = wrap(wall - heading);
  const [slide, angle] =
    Math.abs(off) <= Math.PI / 2 ? [wall, off] : [wall + Math.PI, wrap(wall + Math.PI - heading)];
  if (Math.abs(angle) > END_ON) return null;
  const push = Math.min(radius - here.clearance, ds / 2);
  // Along the wall, set off from it by as much as the step can give.
  const sx = from.x + ds * Math.sin(slide) + push * here.inX;
  const sz = from.z + ds * Math.cos(slide) + push * here.inZ;
  return { x: sx, z: sz, heading: heading + angle };
};

const wrap = (angle: number): number => Math.atan2(Math.sin(angle), Math.cos(angle));
