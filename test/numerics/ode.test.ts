/** The integrator against closed forms: order, error control, dense output, events, failures. */
import { describe, expect, test } from "vitest";
import { type Integrator, integrator, type OdeOptions, type OdeSystem } from "../../src/numerics/ode.js";

/** Kepler's orbit of eccentricity e, unit semi-axis and unit G M, from the pericentre (Kepler 1609, Newton 1687). */
const kepler: OdeSystem = {
  size: 4,
  fillSlope(point, slope) {
    const x = point[1]!;
    const y = point[2]!;
    const cube = (x * x + y * y) ** 1.5;
    slope[1] = point[3]!;
    slope[2] = point[4]!;
    slope[3] = -x / cube;
    slope[4] = -y / cube;
  },
};

function orbit(eccentricity: number, options: OdeOptions): Integrator {
  const made = integrator(kepler, options);
  made.point.set([0, 1 - eccentricity, 0, 0, Math.sqrt((1 + eccentricity) / (1 - eccentricity))]);
  return made;
}

/** Position at time t by Kepler's equation E - e sin E = t, by Newton's method. */
function exactOrbit(eccentricity: number, t: number): [x: number, y: number] {
  let anomaly = t;
  for (let i = 0; i < 50; i++)
    anomaly -= (anomaly - eccentricity * Math.sin(anomaly) - t) / (1 - eccentricity * Math.cos(anomaly));
  return [Math.cos(anomaly) - eccentricity, Math.sqrt(1 - eccentricity ** 2) * Math.sin(anomaly)];
}

const growth: OdeSystem = {
  size: 1,
  fillSlope(point, slope) {
    slope[1] = point[1]!;
  },
};

describe("accuracy", () => {
  test.each([1e-6, 1e-8, 1e-10, 1e-12])(
    "an orbit of eccentricity 0.5 at tolerance %d, over one period",
    (tolerance) => {
      const made = orbit(0.5, { relativeTolerance: tolerance, absoluteTolerance: tolerance });
      made.integrate(2 * Math.PI);
      const [x, y] = exactOrbit(0.5, 2 * Math.PI);
      // 2.4, 5.7, 20 and 59 tolerances measured, in 14 to 59 steps.
      expect(Math.hypot(made.point[1]! - x, made.point[2]! - y)).toBeLessThan(100 * tolerance);
    },
  );

  test("e^x over [0, 1] to rounding, backwards too", () => {
    const made = integrator(growth, { relativeTolerance: 1e-15 });
    made.point.set([0, 1]);
    made.integrate(1);
    expect(Math.abs(made.point[1]! / Math.E - 1)).toBeLessThan(4e-16);
    made.firstStep = 0;
    made.integrate(0);
    expect(Math.abs(made.point[1]! - 1)).toBeLessThan(4e-16);
    expect(made.point[0]).toBe(0);
  });

  test("halving the step divides the error by 2^8", () => {
    // Steps are fixed by a tolerance that refuses none and a firstStep for each.
    const errors = [8, 16].map((steps) => {
      const made = orbit(0.2, { relativeTolerance: 1e6, absoluteTolerance: 1e6 });
      for (let i = 1; i <= steps; i++) made.integrate((2 * i) / steps);
      const [x, y] = exactOrbit(0.2, 2);
      expect(made.count.steps).toBe(steps);
      return Math.hypot(made.point[1]! - x, made.point[2]! - y);
    });
    expect(Math.log2(errors[0]! / errors[1]!)).toBeGreaterThan(7.5);
    expect(Math.log2(errors[0]! / errors[1]!)).toBeLessThan(9.5);
  });

  test("the number of steps grows as tolerance^(-1/8)", () => {
    const steps = [1e-7, 1e-11].map((tolerance) => {
      const made = orbit(0.3, { relativeTolerance: tolerance, absoluteTolerance: tolerance });
      made.integrate(40);
      return made.count.steps;
    });
    expect(Math.log10(steps[1]! / steps[0]!) / 4).toBeGreaterThan(0.1);
    expect(Math.log10(steps[1]! / steps[0]!) / 4).toBeLessThan(0.15);
  });
});

describe("dense output", () => {
  test("is as accurate as the steps", () => {
    const made = orbit(0.5, { relativeTolerance: 1e-11, absoluteTolerance: 1e-11 });
    const at = new Float64Array(5);
    let worst = 0;
    let steps = 0;
    made.integrate(2 * Math.PI, {
      onStep(step) {
        steps += 1;
        for (const t of [0.1, 0.37, 0.5, 0.81, 1]) {
          at[0] = step.start + t * (step.end - step.start);
          step.interpolate(at);
          const [x, y] = exactOrbit(0.5, at[0]);
          worst = Math.max(worst, Math.hypot(at[1]! - x, at[2]! - y));
        }
      },
    });
    expect(steps).toBe(made.count.steps);
    expect(worst).toBeLessThan(1e-9);
  });
});

describe("events", () => {
  test("the orbit crosses its axis at half a period, to the accuracy of the steps", () => {
    const made = orbit(0.5, { relativeTolerance: 1e-13, absoluteTolerance: 1e-13 });
    expect(made.integrate(6, { event: (point) => point[2]! })).toBe(true);
    expect(Math.abs(made.point[0]! - Math.PI)).toBeLessThan(2e-11);
    expect(Math.abs(made.point[1]! + 1.5)).toBeLessThan(2e-11);
    expect(made.integrate(6.28, { event: (point) => point[2]! })).toBe(false);
    expect(made.point[0]).toBe(6.28);
  });

  test("one that does not come leaves the end", () => {
    const made = integrator(growth);
    made.point.set([0, 1]);
    expect(made.integrate(1, { event: (point) => point[1]! - 10 })).toBe(false);
    expect(made.point[0]).toBe(1);
  });
});

describe("failures say which", () => {
  const code = (argument: string) => expect.objectContaining({ code: "integration-failed", argument });

  test("a pole of the solution: the step becomes too small", () => {
    const made = integrator({ size: 1, fillSlope: (point, slope) => slope.fill(point[1]! ** 2) });
    made.point.set([0, 1]); // 1/(1 - x)
    expect(() => made.integrate(2)).toThrow(code("step"));
    expect(made.point[0]).toBeCloseTo(1, 8);
  });

  test("too many steps", () => {
    const made = orbit(0.9, { maximumSteps: 20 });
    expect(() => made.integrate(100)).toThrow(code("steps"));
  });

  test("a slope that is not a number, at once and on the way", () => {
    const made = integrator({ size: 1, fillSlope: (point, slope) => slope.fill(Math.sqrt(1 - point[0]!)) });
    made.point.set([2, 1]);
    expect(() => made.integrate(3)).toThrow(code("slope"));
    made.point.set([0, 1]);
    expect(() => made.integrate(3)).toThrow(expect.objectContaining({ code: "integration-failed" }));
    expect(made.point[0]).toBeLessThanOrEqual(1);
  });
});

test("nothing to do is nothing done", () => {
  const made = integrator(growth);
  made.point.set([1, 2]);
  expect(made.integrate(1)).toBe(false);
  expect([...made.point]).toEqual([1, 2]);
  expect(made.count.evaluations).toBe(0);
});
