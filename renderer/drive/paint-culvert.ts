import { type Pose, rotate, subtract, type Vec3 } from '../../shared-model/shape/vector.ts';
import type { Facet } from './culvert.ts';

/** Half of the camera's horizontal view [rad]. */
const HALF_VIEW = 0.75;
const NEAR = 0.04;
/** Farther than this the light does not reach [m]. */
const FAR = 9;
/** Distance at which the light has fallen to half [m]. */
const LIGHT = 1.5;

/**
 * Paints what a camera at `pose` sees of the facets, farthest first. The picture is turned by `roll` [rad], so that
 * down is down on screen.
 */
export const paintCulvert = (
  ctx: CanvasRenderingContext2D,
  facets: readonly Facet[],
  pose: Pose,
  roll: number,
): void => {
  const { width, height } = ctx.canvas;
  const focal = width / 2 / Math.tan(HALF_VIEW);
  ctx.setTransform(1, 0, 0, 1, 0, 0);
  ctx.fillStyle = '#050505';
  ctx.fillRect(0, 0, width, height);
  ctx.translate(width / 2, height / 2);
  ctx.rotate(roll);
  const back: Pose['quaternion'] = [
    pose.quaternion[0],
    -pose.quaternion[1],
    -pose.quaternion[2],
    -pose.quaternion[3],
  ];
  const seen = facets.flatMap((facet) => {
    const first = facet.corners[0]!;
    if (Math.hypot(first[0] - pose.position[0], first[2] - pose.position[2]) > FAR) return [];
    const corners = clipNear(facet.corners.map((corner) => rotate(back, subtract(corner, pose.position))));
    if (corners.length < 3) return [];
    const distance = corners.reduce((sum, corner) => sum + Math.hypot(...corner), 0) / corners.length;
    return [{ facet, corners, distance }];
  });
  seen.sort((a, b) => b.distance - a.distance);
  for (const { facet, corners, distance } of seen) {
    ctx.beginPath();
    corners.forEach(([x, y, z], i) =>
      i === 0 ? ctx.moveTo((x / z) * focal, (y / z) * focal) : ctx.lineTo((x / z) * focal, (y / z) * focal),
    );
    ctx.closePath();
    const colour = shade(facet, corners, distance);
    ctx.fillStyle = colour;
    ctx.fill();
    // Mortar joints, and no seams between neighbours.
    ctx.strokeStyle = facet.kind === 'brick' && distance < 4 ? 'rgba(20,16,14,0.55)' : colour;
    ctx.lineWidth = 1;
    ctx.stroke();
  }
  ctx.setTransform(1, 0, 0, 1, 0, 0);
  crosshair(ctx);
};

const BASE = { brick: [150, 98, 74], silt: [104, 92, 74], end: [120, 104, 92] } as const;

const shade = (facet: Facet, corners: readonly Vec3[], distance: number): string => {
  const [x, y, z] = corners[0]!;
  // Light comes from the camera, in a cone.
  const off = Math.acos(Math.min(1, z / Math.max(1e-6, Math.hypot(x, y, z))));
  const cone = Math.max(0.25, 1 - (off / 1.1) ** 2);
  const light = ((0.75 + 0.35 * facet.grain) * cone) / (1 + (distance / LIGHT) ** 2);
  const [r, g, b] = BASE[facet.kind];
  return `rgb(${Math.round(r * light * 1.5)},${Math.round(g * light * 1.5)},${Math.round(b * light * 1.5)})`;
};

/** The part of a polygon in front of the near plane. */
const clipNear = (corners: readonly Vec3[]): Vec3[] =>
  corners.flatMap((corner, i) => {
    const next = corners[(i + 1) % corners.length]!;
    const kept: Vec3[] = corner[2] >= NEAR ? [corner] : [];
    if (corner[2] >= NEAR === next[2] >= NEAR) return kept;
    const t = (NEAR - corner[2]) / (next[2] - corner[2]);
    return [...kept, [corner[0] + t * (next[0] - corner[0]), corner[1] + t * (next[1] - corner[1]), NEAR]];
  });

const crosshair = (ctx: CanvasRenderingContext2D): void => {
  const [x, y] = [ctx.canvas.width / 2, ctx.canvas.height / 2];
  ctx.strokeStyle = 'rgba(255,255,255,0.55)';
  ctx.beginPath();
  for (const [a, b] of [
    [8, 26],
    [-8, -26],
  ] as const) {
    ctx.moveTo(x + a, y);
    ctx.lineTo(x + b, y);
    ctx.moveTo(x, y + a);
    ctx.lineTo(x, y + b);
  }
  ctx.stroke();
};
