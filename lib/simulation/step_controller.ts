/** Least and greatest factor between a step size and the next. */
const LEAST = 0.1;
const MOST = 8;
/** Part of the step that the error allows which is taken. */
const CAUTION = 0.9;

/** Chooses the sizes of one-step methods from their errors: the elementary rule, and after an accepted
 * step the smaller of it and the predictive rule
 *
 * h_new = 0.9 h (h/h_old) (err_old/err²)^(1/p), p the order of the error estimate plus 1.
 *
 * Source: K. Gustafsson, Control-theoretic techniques for stepsize selection in implicit Runge–Kutta
 * methods, ACM Trans. Math. Softw. 20 (1994) 496. */
export class StepController {
  readonly #power: number;
  #errorBefore = 0;
  #stepBefore = 0;

  /** @param embeddedOrder order of the method behind the error estimate */
  constructor(embeddedOrder: number) {
    this.#power = 1 / (embeddedOrder + 1);
  }

  /** Forgets the steps before, as after an event. */
  restart(): void {
    this.#stepBefore = 0;
  }

  /** Next step size after a step of size h with an error norm of 1 or less. */
  accepted(error: number, h: number): number {
    let factor = CAUTION * Math.pow(error, -this.#power);
    if (this.#stepBefore > 0) {
      const predicted = CAUTION * (h / this.#stepBefore) *
        Math.pow(this.#errorBefore / (error * error), this.#power);
      if (predicted < factor) factor = predicted;
    }
    this.#errorBefore = Math.max(1e-2, error);
    this.#stepBefore = h;
    return h * (factor > MOST ? MOST : factor > LEAST ? factor : LEAST);
  }

  /** Next step size after a step of size h whose error norm was above 1, or no number. */
  rejected(error: number, h: number): number {
    const factor = CAUTION * Math.pow(error, -this.#power);
    return h * (factor > LEAST ? Math.min(factor, CAUTION) : LEAST);
  }
}
