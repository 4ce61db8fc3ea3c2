import { describe, expect, test } from "vitest";
import { StepController } from "../../lib/simulation/step_controller.ts";

describe("the next step size", () => {
  test("is that whose error would be a little below 1, errors going as h^(order + 1)", () => {
    expect(new StepController(4).accepted(0.9 ** 5, 2)).toBeCloseTo(2, 12);
    expect(new StepController(4).accepted(1e-3, 1)).toBeCloseTo(0.9 * 10 ** 0.6, 12);
  });
  test("grows 8-fold at most and shrinks to a tenth at most", () => {
    expect(new StepController(4).accepted(0, 1)).toBe(8);
    expect(new StepController(4).rejected(1e30, 1)).toBe(0.1);
    expect(new StepController(4).rejected(NaN, 1)).toBe(0.1);
  });
  test("is smaller where errors grow from step to step", () => {
    const growing = new StepController(4);
    growing.accepted(0.1, 1);
    const even = new StepController(4);
    even.accepted(0.5, 1);
    expect(growing.accepted(0.5, 1)).toBeLessThan(even.accepted(0.5, 1));
  });
  test("never grows after a rejection", () => {
    expect(new StepController(4).rejected(1.0000001, 1)).toBeLessThan(0.91);
  });
});
