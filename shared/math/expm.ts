import { add, identity, infinityNorm, multiply, solve } from "./matrix.ts";

/** Coefficients of the [13/13] Padé approximant of exp (Higham, SIAM J. Matrix Anal. Appl. 26(4), 2005, Table 2.1 ff.). */
const PADE_13 = [
  64764752532480000, 32382376266240000, 7771770303897600, 1187353796428800, 129060195264000, 10559470521600, 670442572800, 33522128640, 1323241920,
  40840800, 960960, 16380, 182, 1,
];
/** Largest norm for which that approximant is exact to double precision; same source, Table 2.3. */
const THETA_13 = 5.371920351148152;

/** exp(A), a: n x n, by scaling and squaring. Throws RangeError when an entry is not finite. */
export function expm(a: Float64Array, n: number): Float64Array {
  const norm = infinityNorm(a, n);
  if (!Number.isFinite(norm)) throw new RangeError("expm of a matrix that is not finite");
  let squarings = 0;
  let scale = 1;
  while (norm * scale > THETA_13) {
    scale /= 2;
    squarings++;
  }
  const x = a.map((value) => value * scale);
  const mul = (p: Float64Array, q: Float64Array) => multiply(p, q, n, n, n);
  const x2 = mul(x, x);
  const x4 = mul(x2, x2);
  const x6 = mul(x4, x2);
  const one = identity(n);
  const b = PADE_13;
  const sum = (c6: number, c4: number, c2: number, c0: number) => x6.map((value, i) => c6 * value + c4 * x4[i] + c2 * x2[i] + c0 * one[i]);
  const u = mul(x, add(mul(x6, sum(b[13], b[11], b[9], 0)), sum(b[7], b[5], b[3], b[1])));
  const v = add(mul(x6, sum(b[12], b[10], b[8], 0)), sum(b[6], b[4], b[2], b[0]));
  let result = solve(add(v, u, -1), add(v, u), n, n);
  if (!result) throw new RangeError("expm: the approximant's denominator is singular");
  for (let i = 0; i < squarings; i++) result = mul(result, result);
  return result;
}
