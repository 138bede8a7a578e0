import type { Passage } from '../../shared-model/contract/frame.ts';
import type { Vec3 } from '../../shared-model/shape/vector.ts';

/** A flat piece of wall, floor or vault as the camera may see it. */
export interface Facet {
  readonly corners: readonly Vec3[];
  readonly kind: 'brick' | 'silt' | 'end';
  /** 0 to 1, a fixed roughness of its own. */
  readonly grain: number;
}

/** Length of one ring of facets [m]. */
const RING = 0.22;

/** Facets of all passages, without those that another passage opens into. */
export const culvertFacets = (passages: readonly Passage[]): Facet[] =>
  passages.flatMap((passage) => {
    const rings = ringsOf(passage);
    const others = passages.filter((one) => one !== passage);
    const open = others.some((other) => sameSpot(other.centreline[0]!, passage.centreline.at(-1)!));
    const facets = rings.slice(1).flatMap((ring, i) => between(rings[i]!, ring));
    const end: Facet[] = open ? [] : [{ corners: rings.at(-1)!.points, kind: 'end', grain: 0.5 }];
    return [...facets.filter((facet) => !isInside(others, middleOf(facet))), ...end];
  });

interface Ring {
  readonly points: readonly Vec3[];
  readonly at: number;
}

/** Cross-section: floor, upright walls to 55 % of the height, and a round vault. */
const profile = (width: number, height: number): readonly (readonly [across: number, up: number])[] => {
  const half = width / 2;
  const spring = 0.55 * height;
  const vault = Array.from({ length: 7 }, (_, i) => {
    const angle = (Math.PI * i) / 6;
    return [half * Math.cos(angle), spring + (height - spring) * Math.sin(angle)] as const;
  });
  return [
    [0.4 * half, 0],
    [half, 0.02],
    [half, spring / 2],
    ...vault,
    [-half, spring / 2],
    [-half, 0.02],
    [-0.4 * half, 0],
  ];
};

const ringsOf = (passage: Passage): Ring[] => {
  const rings: Ring[] = [];
  let at = 0;
  for (let i = 1; i < passage.centreline.length; i++) {
    const a = passage.centreline[i - 1]!;
    const b = passage.centreline[i]!;
    const span = Math.hypot(b[0] - a[0], b[2] - a[2]);
    const steps = Math.max(1, Math.round(span / RING));
    const [dx, dz] = [(b[0] - a[0]) / span, (b[2] - a[2]) / span];
    for (let k = i === 1 ? 0 : 1; k <= steps; k++) {
      const t = k / steps;
      const mix = (list: readonly number[]) => list[i - 1]! + t * (list[i]! - list[i - 1]!);
      const floor: Vec3 = [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1]), a[2] + t * (b[2] - a[2])];
      rings.push({
        at: at + t * span,
        points: profile(mix(passage.width), mix(passage.height)).map(
          ([across, up]): Vec3 => [floor[0] + across * dz, floor[1] - up, floor[2] - across * dx],
        ),
      });
    }
    at += span;
  }
  return rings;
};

const between = (near: Ring, far: Ring): Facet[] =>
  near.points.map((_, i) => {
    const j = (i + 1) % near.points.length;
    const floor = i === 0 || i >= near.points.length - 2;
    return {
      corners: [near.points[i]!, near.points[j]!, far.points[j]!, far.points[i]!],
      kind: floor ? 'silt' : 'brick',
      grain: fract(Math.sin(near.at * 91.7 + i * 37.3) * 4375.5),
    };
  });

const isInside = (passages: readonly Passage[], point: Vec3): boolean =>
  passages.some((passage) =>
    passage.centreline.slice(1).some((b, i) => {
      const a = passage.centreline[i]!;
      const span = Math.hypot(b[0] - a[0], b[2] - a[2]);
      const along = ((point[0] - a[0]) * (b[0] - a[0]) + (point[2] - a[2]) * (b[2] - a[2])) / span;
      if (along < 0 || along > span) return false;
      const share = along / span;
      const off = Math.hypot(
        point[0] - a[0] - share * (b[0] - a[0]),
        point[2] - a[2] - share * (b[2] - a[2]),
      );
      const half = (passage.width[i]! + share * (passage.width[i + 1]! - passage.width[i]!)) / 2;
      return off < half - 0.02;
    }),
  );

const middleOf = (facet: Facet): Vec3 => {
  const n = facet.corners.length;
  return [0, 1, 2].map(
    (axis) => facet.corners.reduce((sum, corner) => sum + corner[axis]!, 0) / n,
  ) as unknown as Vec3;
};

const sameSpot = (a: Vec3, b: Vec3): boolean => Math.hypot(a[0] - b[0], a[2] - b[2]) < 1e-6;
const fract = (x: number): number => x - Math.floor(x);
