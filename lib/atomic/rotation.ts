/**
 * The rotation that makes a symmetric 2x2 matrix (a c; c b) diagonal: tangent of its angle, at most 1 in size, good to the last digit even
 * where c is far smaller than b - a. H. Rutishauser, Numer. Math. 9, 1 (1966). The diagonal becomes a - t c, b + t c.
 */
export function rotationTangent(a: number, b: number, c: number): number {
  if (c === 0) return 0
  const ratio = (b - a) / (2 * c)
  // |ratio| may overflow when c is tiny; its reciprocal is then 0 and so is the tangent
  return (ratio < 0 ? -1 : 1) / (Math.abs(ratio) + Math.sqrt(1 + ratio * ratio))
}
