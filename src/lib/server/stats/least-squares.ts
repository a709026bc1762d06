import { StatsError } from './errors';

export type LeastSquares = {
  readonly coefficients: number[];
  /** (X'X)^-1, from the triangle of the QR decomposition. */
  readonly unscaledCovariance: number[][];
  readonly residuals: number[];
  readonly residualSumOfSquares: number;
};

/** Diagonal elements of R below this part of their column's length count as zero. */
const rankTolerance = 1e-13;

/**
 * Ordinary least squares by Householder QR. `columns` are the columns of X (p of n numbers each), `response` has n numbers; for
 * a weighted fit the caller multiplies both by the square roots of the weights. The normal equations are never formed: they
 * square the condition number.
 *
 * @throws StatsError `singular-design` when a column depends on those before it, `too-few-values` when n < p.
 * Source: Golub and Van Loan, Matrix Computations, algorithm 5.3.2 (from memory).
 */
export function leastSquares(
  columns: readonly (readonly number[])[],
  response: readonly number[]
): LeastSquares {
  const n = response.length;
  const p = columns.length;
  if (n < p) {
    throw new StatsError('too-few-values', `${n} points given, at least ${p} needed for ${p} coefficients.`);
  }
  const q = columns.map((column) => Float64Array.from(column));
  const lengths = q.map((column) => Math.hypot(...column));
  const y = Float64Array.from(response);
  const triangle = columns.map(() => new Float64Array(p));

  for (let k = 0; k < p; k += 1) {
    const pivot = q[k]!;
    let norm = 0;
    for (let i = k; i < n; i += 1) norm = Math.hypot(norm, pivot[i]!);
    if (!(norm > rankTolerance * lengths[k]!)) {
      throw new StatsError(
        'singular-design',
        `The points do not determine coefficient ${k + 1} of ${p}: too few distinct levels.`
      );
    }
    const alpha = pivot[k]! > 0 ? -norm : norm;
    // v = x - alpha e, stored in place; its squared length without cancellation.
    pivot[k] = pivot[k]! - alpha;
    const halfSquare = -alpha * pivot[k]!;
    for (let j = k + 1; j < p; j += 1) reflect(pivot, q[j]!, k, halfSquare);
    reflect(pivot, y, k, halfSquare);
    triangle[k]![k] = alpha;
    for (let j = k + 1; j < p; j += 1) triangle[k]![j] = q[j]![k]!;
  }

  const coefficients = backSubstitute(triangle, y);
  const residuals = response.map((value, i) => {
    let fitted = 0;
    for (let j = 0; j < p; j += 1) fitted += coefficients[j]! * columns[j]![i]!;
    return value - fitted;
  });
  let residualSumOfSquares = 0;
  for (const residual of residuals) residualSumOfSquares += residual * residual;
  return { coefficients, unscaledCovariance: inverseGram(triangle), residuals, residualSumOfSquares };
}

/** Applies I - v v'/halfSquare to `target`, v in rows k and below of `v`; halfSquare = v'v/2. */
function reflect(v: Float64Array, target: Float64Array, k: number, halfSquare: number): void {
  let dot = 0;
  for (let i = k; i < v.length; i += 1) dot += v[i]! * target[i]!;
  const factor = dot / halfSquare;
  for (let i = k; i < v.length; i += 1) target[i] = target[i]! - factor * v[i]!;
}

function backSubstitute(triangle: readonly Float64Array[], right: ArrayLike<number>): number[] {
  const p = triangle.length;
  const solution = new Array<number>(p).fill(0);
  for (let i = p - 1; i >= 0; i -= 1) {
    let rest = right[i]!;
    for (let j = i + 1; j < p; j += 1) rest -= triangle[i]![j]! * solution[j]!;
    solution[i] = rest / triangle[i]![i]!;
  }
  return solution;
}

function inverseGram(triangle: readonly Float64Array[]): number[][] {
  const inverse = triangle.map((_, column) =>
    backSubstitute(
      triangle,
      triangle.map((__, i) => (i === column ? 1 : 0))
    )
  );
  // inverse[c] is column c of R^-1; (X'X)^-1 = R^-1 R^-T.
  return triangle.map((_, i) =>
    triangle.map((__, j) => inverse.reduce((sum, column) => sum + column[i]! * column[j]!, 0))
  );
}
