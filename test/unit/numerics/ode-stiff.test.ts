/** The stiff stepper: order of convergence, damping at infinity, published stiff problems, error control, failures. */
import { describe, expect, test } from "vitest";
import { CalculationError } from "../../../src/numerics/check.ts";
import { integrateStiff, StiffStepper, type StiffSystem } from "../../../src/numerics/ode-stiff.ts";
import { RODAS4, RODAS5P } from "../../../src/numerics/rosenbrock-coefficients.ts";

const METHODS = ["rodas4", "rodas5p"] as const;

/** Smooth, not stiff, not autonomous: y1 = exp(sin t), y2 = cos(t)/(2 + t), coupled. */
const smooth: StiffSystem = {
  n: 2,
  rhs(t, y, dydt) {
    dydt[0] = Math.cos(t) * y[0] + (y[1] - Math.cos(t) / (2 + t));
    dydt[1] = -y[1] / (2 + t) - (Math.sin(t) / (2 + t)) * (y[0] / Math.exp(Math.sin(t)));
  },
  jacobian(t, _y, dfdy) {
    dfdy.set([Math.cos(t), 1, -Math.sin(t) / (2 + t) / Math.exp(Math.sin(t)), -1 / (2 + t)]);
  },
  timeDerivative(t, y, dfdt) {
    const e = Math.exp(Math.sin(t));
    const [s, c] = [Math.sin(t), Math.cos(t)];
    dfdt[0] = -s * y[0] + s / (2 + t) + c / (2 + t) ** 2;
    dfdt[1] = y[1] / (2 + t) ** 2 - (y[0] / e) * (c / (2 + t) - s / (2 + t) ** 2 - (s * c) / (2 + t));
  },
};
const exact = (t: number) => [Math.exp(Math.sin(t)), Math.cos(t) / (2 + t)];

/** Equal steps: a tolerance that accepts everything, and a longest step. */
function fixedSteps(
  system: StiffSystem,
  t0: number,
  y0: readonly number[],
  tEnd: number,
  steps: number,
  method: "rodas4" | "rodas5p",
) {
  const h = (tEnd - t0) / steps;
  const stepper = new StiffStepper(system, t0, y0, tEnd, { rtol: 1e30, atol: 1e30, method, firstStep: h, maxStep: h });
  while (!stepper.done) stepper.step();
  expect(stepper.counts).toMatchObject({ steps, rejected: 0 });
  return stepper;
}

describe("order of convergence on a smooth problem, steps halved twice", () => {
  test.each([
    ["rodas4", 4, [80, 160, 320]],
    ["rodas5p", 5, [40, 80, 160]],
  ] as const)("%s has order %i", (method, order, steps) => {
    const errors = steps.map((n) => {
      const { y } = fixedSteps(smooth, 0, exact(0), 4, n, method);
      const [a, b] = exact(4);
      return Math.hypot(y[0] - a, y[1] - b);
    });
    const measured = [0, 1].map((i) => Math.log2(errors[i] / errors[i + 1]));
    for (const value of measured) expect(Math.abs(value - order), `orders ${measured}`).toBeLessThan(0.2);
  });

  test("interpolation inside a step has order 4", () => {
    const error = (n: number) => {
      const h = 2 / n;
      const stepper = new StiffStepper(smooth, 0, exact(0), 2, {
        rtol: 1e30,
        atol: 1e30,
        method: "rodas5p",
        firstStep: h,
        maxStep: h,
      });
      const out = new Float64Array(2);
      let worst = 0;
      while (!stepper.done) {
        stepper.step();
        stepper.interpolate((stepper.tOld + stepper.t) / 2, out);
        worst = Math.max(worst, Math.abs(out[0] - exact((stepper.tOld + stepper.t) / 2)[0]));
      }
      return worst;
    };
    expect(Math.abs(Math.log2(error(40) / error(80)) - 4)).toBeLessThan(0.2);
  });

  test("a forward difference in time serves where the derivative is not given", () => {
    const plain = { ...smooth, timeDerivative: undefined };
    const [a] = exact(4);
    const error = Math.abs(fixedSteps(plain, 0, exact(0), 4, 40, "rodas5p").y[0] - a);
    expect(error).toBeLessThan(3 * Math.abs(fixedSteps(smooth, 0, exact(0), 4, 40, "rodas5p").y[0] - a) + 1e-9);
  });
});

describe("tableaux", () => {
  test.each([RODAS4, RODAS5P])("$name: stages agree with their counts, nodes with their rows", (m) => {
    expect(m.C).toHaveLength(m.stages);
    expect(m.c).toHaveLength(m.stages);
    expect(m.d).toHaveLength(m.stages);
    expect(m.a).toHaveLength(m.explicitStages);
    m.C.forEach((row, i) => {
      expect(row).toHaveLength(i);
    });
    expect(m.d[0]).toBe(m.gamma);
  });

  test.each(METHODS)("%s: R(infinity) = 0, one huge step on y' = lambda y lands on zero", (method) => {
    const values = [-1e6, -1e9, -1e12].map((lambda) => {
      const system: StiffSystem = {
        n: 1,
        rhs: (_t, y, f) => {
          f[0] = lambda * y[0];
        },
        jacobian: (_t, _y, J) => {
          J[0] = lambda;
        },
        timeDerivative: (_t, _y, f) => f.fill(0),
      };
      return Math.abs(fixedSteps(system, 0, [1], 1, 1, method).y[0]);
    });
    // R(z) = O(1/z): each factor 1000 in lambda takes 1000 off, down to the rounding of the coefficients.
    expect(values[0]).toBeLessThan(1e-4);
    expect(values[1]).toBeLessThan(values[0] * 1.1e-3 + 1e-11);
    expect(values[2]).toBeLessThan(1e-10);
  });

  test.each(METHODS)("%s: |R(z)| <= 1 along the negative axis and the imaginary one", (method) => {
    for (const [re, im] of [-0.01, -0.1, -1, -3, -10, -100, -1e4].flatMap((x) => [
      [x, 0],
      [0, x],
      [x, x],
    ])) {
      const system: StiffSystem = {
        n: 2,
        rhs: (_t, y, f) => {
          f[0] = re * y[0] - im * y[1];
          f[1] = im * y[0] + re * y[1];
        },
        jacobian: (_t, _y, J) => J.set([re, -im, im, re]),
        timeDerivative: (_t, _y, f) => f.fill(0),
      };
      const { y } = fixedSteps(system, 0, [1, 0], 1, 1, method);
      expect(Math.hypot(y[0], y[1]), `z = ${re} + ${im} i`).toBeLessThanOrEqual(1 + 1e-9);
    }
  });
});

/** Robertson's problem: y1' = -0.04 y1 + 1e4 y2 y3, y2' = 0.04 y1 - 1e4 y2 y3 - 3e7 y2^2, y3' = 3e7 y2^2. */
const robertson: StiffSystem = {
  n: 3,
  rhs(_t, y, f) {
    f[0] = -0.04 * y[0] + 1e4 * y[1] * y[2];
    f[2] = 3e7 * y[1] * y[1];
    f[1] = -f[0] - f[2];
  },
  jacobian(_t, y, J) {
    J.set([-0.04, 1e4 * y[2], 1e4 * y[1], 0.04, -1e4 * y[2] - 6e7 * y[1], -1e4 * y[1], 0, 6e7 * y[1], 0]);
  },
  timeDerivative: (_t, _y, f) => f.fill(0),
};

describe("published stiff problems", () => {
  // Mazzia & Magherini 2008, Test Set for IVP Solvers, problem ROBER, reference solution at t = 1e11 (from memory).
  const REFERENCE = [0.2083340149701255e-7, 0.8333360770334713e-13, 0.999999979166505];
  test.each(METHODS)("Robertson's problem to t = 1e11 by %s", (method) => {
    const options = { rtol: 1e-8, atol: Float64Array.of(1e-14, 1e-20, 1e-14), method, firstStep: 1e-6 };
    const { y, counts } = integrateStiff(robertson, 0, [1, 0, 0], 1e11, options);
    REFERENCE.forEach((value, i) => {
      expect(Math.abs(y[i] / value - 1), `y${i + 1}`).toBeLessThan(1e-5);
    });
    // Mass is conserved to rounding by a linear invariant.
    expect(Math.abs(y[0] + y[1] + y[2] - 1)).toBeLessThan(1e-10);
    expect(counts.steps).toBeLessThan(4000);
  });

  // The classic demonstration of the same problem at t = 40 (Hindmarsh 1983, in Scientific Computing, p. 55).
  test("Robertson's problem at t = 0.4, 4 and 40, hitting each exactly", () => {
    const seen: number[] = [];
    const published = [
      [0.4, 0.985172, 3.38641e-5, 0.0147939],
      [4, 0.905518, 2.24048e-5, 0.0944589],
      [40, 0.715827, 9.18552e-6, 0.284164],
    ];
    const options = { rtol: 1e-9, atol: 1e-14, firstStep: 1e-6 };
    integrateStiff(robertson, 0, [1, 0, 0], 40, options, [0.4, 4, 40], (i, t, y) => {
      seen.push(t);
      published[i].slice(1).forEach((value, k) => {
        expect(Math.abs(y[k] / value - 1), `y${k + 1}(${t})`).toBeLessThan(2e-5);
      });
    });
    expect(seen).toEqual([0.4, 4, 40]);
  });

  test.each(METHODS)("Prothero and Robinson, y' = -1e6 (y - cos t) - sin t, stays on cos t: %s", (method) => {
    const lambda = -1e6;
    const system: StiffSystem = {
      n: 1,
      rhs: (t, y, f) => {
        f[0] = lambda * (y[0] - Math.cos(t)) - Math.sin(t);
      },
      jacobian: (_t, _y, J) => {
        J[0] = lambda;
      },
    };
    const { y, counts } = integrateStiff(system, 0, [1], 10, { rtol: 1e-7, atol: 1e-9, method });
    expect(Math.abs(y[0] - Math.cos(10))).toBeLessThan(1e-6);
    expect(counts.steps).toBeLessThan(2000);
  });
});

describe("error control", () => {
  test.each(METHODS)("a hundred times tighter tolerance lowers the error at least tenfold: %s", (method) => {
    const error = (rtol: number) => {
      const { y } = integrateStiff(smooth, 0, exact(0), 4, { rtol, atol: rtol, method });
      return Math.abs(y[0] - exact(4)[0]);
    };
    for (const rtol of [1e-4, 1e-6]) expect(error(rtol / 100)).toBeLessThan(error(rtol) / 10);
    expect(error(1e-8)).toBeLessThan(1e-6);
  });

  test("integration backwards in time", () => {
    const { y } = integrateStiff(smooth, 4, exact(4), 0, { rtol: 1e-9, atol: 1e-11 });
    expect(Math.abs(y[0] - 1)).toBeLessThan(1e-6);
  });

  test("an output point does not shorten the steps that follow", () => {
    const plain = integrateStiff(smooth, 0, exact(0), 4, { rtol: 1e-6, atol: 1e-8 }).counts.steps;
    const points = [1, 1.0001, 2, 2.0001, 3, 3.0001];
    const { counts } = integrateStiff(smooth, 0, exact(0), 4, { rtol: 1e-6, atol: 1e-8 }, points);
    expect(counts.steps).toBeLessThanOrEqual(plain + 3 * points.length);
  });

  test("counts add up: one Jacobian a step, one factorisation a try", () => {
    const { counts } = integrateStiff(robertson, 0, [1, 0, 0], 100, { rtol: 1e-6, atol: 1e-12 });
    expect(counts.jacobians).toBe(counts.steps);
    expect(counts.factorisations).toBe(counts.steps + counts.rejected);
    // Six stages a try, the first of them shared by all tries of a step.
    expect(counts.rhs).toBe(counts.steps + 5 * (counts.steps + counts.rejected));
  });
});

describe("failures say where and why", () => {
  const blowUp: StiffSystem = {
    n: 1,
    rhs: (_t, y, f) => {
      f[0] = y[0] * y[0];
    },
    jacobian: (_t, y, J) => {
      J[0] = 2 * y[0];
    },
  };

  test("a solution that ends before tEnd", () => {
    // y = 1/(1 - t).
    const run = () => integrateStiff(blowUp, 0, [1], 2, { rtol: 1e-8, atol: 1e-10, maxSteps: 2000 });
    expect(run).toThrow(CalculationError);
    expect(run).toThrow(/stiff integration: .*(at 0\.99|at 1|reaching 2)/);
  });

  test("a derivative that is not a number", () => {
    const broken: StiffSystem = {
      ...blowUp,
      rhs: (t, _y, f) => {
        f[0] = t > 0.5 ? Number.NaN : 1;
      },
    };
    expect(() => integrateStiff(broken, 0, [0], 1, { rtol: 1e-6, atol: 1e-8 })).toThrow(
      /stiff integration: step .* underflows at 0\.(49|5)/,
    );
  });

  test("too many steps", () => {
    expect(() => integrateStiff(robertson, 0, [1, 0, 0], 1e6, { rtol: 1e-10, atol: 1e-14, maxSteps: 7 })).toThrow(
      /stiff integration: 7 steps without reaching 1000000, at /,
    );
  });

  test("a limit behind, and a system without linear algebra, are refused", () => {
    const stepper = new StiffStepper(smooth, 1, exact(1), 2, { rtol: 1e-6, atol: 1e-8 });
    expect(() => stepper.step(0.5)).toThrow("stiff integration: limit 0.5 is not ahead of 1");
    expect(() => new StiffStepper({ n: 1, rhs: smooth.rhs }, 0, [1], 1, { rtol: 1, atol: 1 })).toThrow(
      "needs a jacobian or a solver",
    );
  });
});
