import { medianOf } from './medianOf.js';

/**
 * The phase that leaves the least residual, in closed form from a 2 x 2 matrix.
 *
 * @param u      shape (columns): real part of A^H y
 * @param v      shape (columns): imaginary part of A^H y
 * @param p      shape (columns): G^-1 u
 * @param q      shape (columns): G^-1 v
 * @param points data of the group, for telling up from down
 * @returns phase in radians, what it explains, the curvature there, and the coefficients in phase
 * @source  own derivation, see `fitGroup`
 */
export function bestPhase(
  u: Float64Array,
  v: Float64Array,
  p: Float64Array,
  q: Float64Array,
  points: readonly { readonly x: number; readonly y: number }[],
) {
  let [uu, uv, vv] = [0, 0, 0];
  for (let a = 0; a < u.length; a += 1) {
    uu += u[a]! * p[a]!;
    uv += u[a]! * q[a]!;
    vv += v[a]! * q[a]!;
  }
  const angle = 0.5 * Math.atan2(2 * uv, uu - vv);
  const [c, s] = [Math.cos(angle), Math.sin(angle)];
  // In absorption lines point up: the cubes of what stands off the middle say so, however lines overlap.
  const turned = points.map(({ x, y }) => c * x + s * y);
  const middle = medianOf(turned);
  let amplitude = 0;
  for (const value of turned) amplitude += (value - middle) ** 3;
  const sign = amplitude >= 0 ? 1 : -1;
  return {
    phaseRad: sign > 0 ? angle : angle + Math.PI,
    explained: c * c * uu + 2 * c * s * uv + s * s * vv,
    curvature: Math.hypot(uu - vv, 2 * uv),
    coefficients: p.map((value, k) => sign * (c * value + s * q[k]!)),
  };
}
