/** A column shorter than this part of its own length after projection adds nothing new. */
const rankTolerance = 1e-9;

/**
 * An orthonormal basis that grows column by column: QR by modified Gram and Schmidt with every column orthogonalised twice, which
 * keeps the basis orthogonal to rounding (Giraud, Langou and Rozloznik, Comput. Math. Appl. 50 (2005) 1069).
 */
export class OrthonormalBasis {
  readonly vectors: Float64Array[] = [];

  /** Adds what the columns bring that is new; returns the added directions, as many as the rank grew by. */
  add(columns: readonly Float64Array[]): Float64Array[] {
    const added: Float64Array[] = [];
    for (const column of columns) {
      const length = Math.sqrt(dot(column, column));
      if (!(length > 0)) continue;
      const rest = column.map((value) => value / length);
      this.reduce(rest);
      this.reduce(rest);
      const remaining = Math.sqrt(dot(rest, rest));
      if (remaining <= rankTolerance) continue;
      const vector = rest.map((value) => value / remaining);
      this.vectors.push(vector);
      added.push(vector);
    }
    return added;
  }

  /** Takes from `target`, in place, its part in the span of the basis. */
  reduce(target: Float64Array): void {
    for (const vector of this.vectors) {
      const along = dot(vector, target);
      for (let i = 0; i < target.length; i += 1) target[i] = target[i]! - along * vector[i]!;
    }
  }
}

/** Squared length of the part of `target` in the span of orthonormal vectors. */
export function squaredProjection(vectors: readonly Float64Array[], target: Float64Array): number {
  let sum = 0;
  for (const vector of vectors) sum += dot(vector, target) ** 2;
  return sum;
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i += 1) sum += a[i]! * b[i]!;
  return sum;
}
