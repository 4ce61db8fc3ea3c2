import { expect, test } from "vitest";
import {
  describeDimension,
  type Dimension,
  DIMENSIONLESS,
  multiplyDimensions,
  sameDimension,
} from "../../lib/quantity/dimension.ts";

const time: Dimension = { ...DIMENSIONLESS, time: 1 };
const length: Dimension = { ...DIMENSIONLESS, length: 1 };

test("a dimension times itself to the power −1 is a pure number", () => {
  expect(sameDimension(multiplyDimensions(time, time, -1), DIMENSIONLESS)).toBe(true);
});

test("multiplying leaves both factors as they were", () => {
  multiplyDimensions(time, length, 3);
  expect(time).toEqual({ ...DIMENSIONLESS, time: 1 });
  expect(length).toEqual({ ...DIMENSIONLESS, length: 1 });
});

test("fractional exponents that add up to a whole one are the same dimension", () => {
  const third = multiplyDimensions(DIMENSIONLESS, time, 1 / 3);
  const whole = multiplyDimensions(multiplyDimensions(third, time, 1 / 3), time, 1 / 3);
  expect(sameDimension(whole, time)).toBe(true);
  expect(sameDimension(third, time)).toBe(false);
});

test("known dimensions are named, others written by base quantity", () => {
  expect(describeDimension(DIMENSIONLESS)).toBe("number");
  expect(describeDimension(time)).toBe("time");
  expect(describeDimension({ ...DIMENSIONLESS, time: -1 })).toBe("first-order rate constant");
  expect(describeDimension({ ...DIMENSIONLESS, length: 1.5, time: -1, amount: -0.5 }))
    .toBe("length^1.5 · time^-1 · amount^-0.5");
});
