/** A least-squares fit. Standard errors from s²(JᵀJ)⁻¹. */
export interface LeastSquares {
  readonly parameters: readonly number[];
  readonly standardErrors: readonly number[];
  readonly covariance: readonly (readonly number[])[];
  /** s, standard deviation of the residuals. */
  readonly deviation: number;
  readonly degreesOfFreedom: number;
}

/**
 * Parameters that make the sum of squared residuals smallest, by Levenberg–Marquardt with central differences. Null where
 * the points do not determine them: too few, a singular normal matrix, or residuals that are not finite.
 * @param residuals of all points for parameters p
 */
export const leastSquares = (
  residuals: (p: readonly number[]) => readonly number[],
  start: readonly number[],
): LeastSquares | null => {
  let p = [...start];
  let r = residuals(p);
  const degreesOfFreedom = r.length - p.length;
  if (degreesOfFreedom < 1 || !r.every(Number.isFinite)) return null;
  let lambda = 1e-3;
  for (let i = 0; i < 200; i++) {
    const { JtJ, Jtr } = normalEquations(residuals, p, r);
    const step = solve(
      JtJ.map((row, k) => row.map((x, c) => (k === c ? x * (1 + lambda) : x))),
      Jtr,
    );
    if (step === null) return null;
    const next = p.map((x, k) => x - step[k]!);
    const tried = residuals(next);
    if (tried.every(Number.isFinite) && squares(tried) <= squares(r)) {
      const settled = step.every((d, k) => Math.abs(d) <= 1e-12 * (Math.abs(p[k]!) + 1e-12));
      p = next;
      r = tried;
      lambda /= 10;
      if (settled) break;
    } else lambda *= 10;
    if (lambda > 1e15) break;
  }
  const inverse = inverted(normalEquations(residuals, p, r).JtJ);
  if (inverse === null) return null;
  const deviation = Math.sqrt(squares(r) / degreesOfFreedom);
  const covariance = inverse.map((row) => row.map((x) => x * deviation ** 2));
  return {
    parameters: p,
    standardErrors: covariance.map((row, k) => Math.sqrt(Math.max(0, row[k]!))),
    covariance,
    deviation,
    degreesOfFreedom,
  };
};

/** Half-width of the 95 % band of a quantity with gradient g over the parameters. */
export const bandOf = (fit: LeastSquares, gradient: readonly number[]): number => {
  const variance = gradient.reduce(
    (sum, a, i) => sum + gradient.reduce((part, b, j) => part + a * b * fit.covariance[i]![j]!, 0),
    0,
  );
  return studentT95(fit.degreesOfFreedom) * Math.sqrt(Math.max(0, variance));
};

/** Two-sided 95 % quantiles of Student's t for 1 to 30 degrees of freedom (any handbook's table). */
const T95 = [
  12.706, 4.303, 3.182, 2.776, 2.571, 2.447, 2.365, 2.306, 2.262, 2.228, 2.201, 2.179, 2.16, 2.145, 2.131,
  2.12, 2.11, 2.101, 2.093, 2.086, 2.08, 2.074, 2.069, 2.064, 2.06, 2.056, 2.052, 2.048, 2.045, 2.042,
];
const Z95 = 1.959964;

/** Half-width of a 95 % interval in standard errors; beyond 30 by the first terms of Cornish and Fisher. */
export const studentT95 = (degreesOfFreedom: number): number => {
  const tabled = T95[degreesOfFreedom - 1];
  if (tabled !== undefined) return tabled;
  const z = Z95;
  const n = degreesOfFreedom;
  return z + (z ** 3 + z) / (4 * n) + (5 * z ** 5 + 16 * z ** 3 + 3 * z) / (96 * n * n);
};

const squares = (r: readonly number[]): number => r.reduce((sum, x) => sum + x * x, 0);

const normalEquations = (
  residuals: (p: readonly number[]) => readonly number[],
  p: readonly number[],
  r: readonly number[],
): { readonly JtJ: number[][]; readonly Jtr: number[] } => {
  const columns = p.map((x, k) => {
    const h = 1e-6 * (Math.abs(x) + 1e-6);
    const at = (value: number) => residuals(p.map((one, c) => (c === k ? value : one)));
    const [up, down] = [at(x + h), at(x - h)];
    return up.map((one, i) => (one - down[i]!) / (2 * h));
  });
  const dot = (a: readonly number[], b: readonly number[]) => a.reduce((sum, x, i) => sum + x * b[i]!, 0);
  return { JtJ: columns.map((a) => columns.map((b) => dot(a, b))), Jtr: columns.map((a) => dot(a, r)) };
};

/** Gauss with pivots, on a matrix scaled to ones on its diagonal; null where it is singular to working precision. */
const solve = (matrix: readonly (readonly number[])[], right: readonly number[]): number[] | null => {
  const n = right.length;
  const scale = matrix.map((row, k) => Math.sqrt(row[k]!));
  const a = matrix.map((row, r) => [
    ...row.map((x, c) => x / (scale[r]! * scale[c]!)),
    right[r]! / scale[r]!,
  ]);
  for (let k = 0; k < n; k++) {
    const pivot = a
      .slice(k)
      .reduce((best, row, i) => (Math.abs(row[k]!) > Math.abs(a[best]![k]!) ? k + i : best), k);
    if (!(Math.abs(a[pivot]![k]!) > SINGULAR)) return null;
    [a[k], a[pivot]] = [a[pivot]!, a[k]!];
    for (let i = k + 1; i < n; i++) {
      const share = a[i]![k]! / a[k]![k]!;
      for (let c = k; c <= n; c++) a[i]![c]! -= share * a[k]![c]!;
    }
  }
  const x = new Array<number>(n).fill(0);
  for (let k = n - 1; k >= 0; k--) {
    const rest = a[k]!.slice(k + 1, n).reduce((sum, value, i) => sum + value * x[k + 1 + i]!, 0);
    x[k] = (a[k]![n]! - rest) / a[k]![k]!;
  }
  return x.map((value, k) => value / scale[k]!);
};
/** What is left of a unit diagonal where two parameters cannot be told apart. */
const SINGULAR = 1e-10;

const inverted = (matrix: readonly (readonly number[])[]): number[][] | null => {
  const columns = matrix.map((_, k) =>
    solve(
      matrix,
      matrix.map((__, i) => (i === k ? 1 : 0)),
    ),
  );
  return columns.some((column) => column === null)
    ? null
    : matrix.map((_, r) => columns.map((column) => column![r]!));
};
