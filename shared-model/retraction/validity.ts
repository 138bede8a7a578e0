import type { Body } from '../body/body.ts';

/** Beam theory of a thin tube holds for bodies of at least so many radii and walls of at most a tenth of one. */
const SHORTEST = 5;
const THINNEST = 10;
/** Margin at least wanted where the theory is left. */
const CAREFUL_MARGIN = 1.5;

/** Length that a shorter body is judged as, as far as it can buckle as a column [m]. */
export const shortestColumn = (body: Body): number => SHORTEST * body.radius;

/** A wall given by membrane stiffnesses is thin; one of solid material has to be (common practice). */
const isThick = ({ radius, wall }: Body): boolean => wall !== 1 && !(radius >= THINNEST * wall);

/** The margin, larger where the wall is too thick for the theory. */
export const carefulMargin = (body: Body, margin: number): number =>
  isThick(body) ? Math.max(margin, CAREFUL_MARGIN) : margin;

/** Which bounds of the theory a body of this length leaves, said to a person. */
export const leavesTheory = (body: Body, length: number): readonly string[] => [
  ...(length > 0 && !(length >= shortestColumn(body)) ? [`shorter than ${SHORTEST} radii`] : []),
  ...(isThick(body) ? [`wall thicker than a ${THINNEST}th of the radius`] : []),
];

/** What the judgement made more careful because of that; empty within the theory. */
export const validityNote = (body: Body, length: number): string => {
  const left = leavesTheory(body, length);
  if (left.length === 0) return '';
  const careful = isThick(body)
    ? `a margin of ${CAREFUL_MARGIN} is wanted`
    : `judged as ${shortestColumn(body).toFixed(2)} m`;
  return ` Beyond the theory (${left.join(', ')}): ${careful}.`;
};
