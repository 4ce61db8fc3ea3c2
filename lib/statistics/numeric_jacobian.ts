/** Writes the residuals at `parameters` to `out`. */
export type ResidualFunction = (parameters: Float64Array, out: Float64Array) => void;

/** Writes the Jacobian of the residuals at `parameters` to `out`, row-major, m·n. */
export type JacobianFunction = (parameters: Float64Array, out: Float64Array) => void;

/** Jacobian of residuals by central differences with one Richardson extrapolation: error of order
 * h⁴, relative about 1e-11 for a smooth model.
 *
 * Source: L. F. Richardson, Phil. Trans. R. Soc. A 210 (1911) 307.
 *
 * @param residuals the residual function
 * @param count number of residuals m
 * @param typical typical size of each parameter, > 0, for parameters near 0
 * @param lower lower bounds @param upper upper bounds; evaluation stays inside them */
export function numericJacobian(
  residuals: ResidualFunction,
  count: number,
  typical: Float64Array,
  lower: Float64Array,
  upper: Float64Array,
): JacobianFunction {
  const n = typical.length;
  const work = [0, 1, 2, 3].map(() => new Float64Array(count));
  const point = new Float64Array(n);
  return (parameters, out) => {
    point.set(parameters);
    for (let j = 0; j < n; j++) {
      const p = parameters[j];
      let h = RELATIVE_STEP * Math.max(Math.abs(p), typical[j] * SMALLEST);
      h = Math.min(h, (upper[j] - lower[j]) / 4);
      // Near a bound the five points are moved inside it as a whole.
      const centre = Math.min(Math.max(p, lower[j] + h), upper[j] - h);
      const offset = p - centre;
      [h, -h, h / 2, -h / 2].forEach((step, k) => {
        point[j] = centre + step;
        residuals(point, work[k]);
      });
      point[j] = p;
      const [far, farBack, near, nearBack] = work;
      for (let i = 0; i < count; i++) {
        const wide = (far[i] - farBack[i]) / (2 * h);
        const narrow = (near[i] - nearBack[i]) / h;
        const slope = (4 * narrow - wide) / 3;
        const bend = offset === 0
          ? 0
          : (far[i] - near[i] - nearBack[i] + farBack[i]) / (0.75 * h * h);
        out[i * n + j] = slope + bend * offset;
      }
    }
  };
}

/** Step relative to the parameter; ε^(1/5) balances truncation h⁴ against rounding ε/h. */
const RELATIVE_STEP = Number.EPSILON ** (1 / 5);

/** A parameter this much smaller than its typical size is stepped by the typical size. */
const SMALLEST = 1e-3;
