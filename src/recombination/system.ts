/** The stiff system of the three-level history: logits of hydrogen and helium and 1 - T_m/T_r against ln a, with exact derivatives. */
import type { LateBackground } from "../background/expansion.ts";
import type { ShiftedSolver, StiffSystem } from "../numerics/ode-stiff.ts";
import type { RecombinationValues } from "./atomic.ts";
import { heliumCoefficients, heliumRate } from "./helium.ts";
import { comptonCoefficient, temperatureRate } from "./matter-temperature.ts";
import { emptyState, type PlasmaState, RATE } from "./plasma-state.ts";
import { sahaCoefficients } from "./saha.ts";
import { hydrogenCoefficients, hydrogenRate } from "./three-level.ts";

/** Components: ln(x_p/x_1s), ln(He ionised/He neutral), 1 - T_m/T_r. */
export const Y = { hydrogen: 0, helium: 1, cooling: 2, size: 3 } as const;

export interface SystemInputs {
  readonly background: LateBackground;
  /** Hydrogen nuclei today [cm^-3]. */
  readonly nH0: number;
  readonly fHe: number;
  readonly alphaFactor: number;
  readonly twoPhotonFactor: number;
  readonly without: readonly string[];
  readonly values: RecombinationValues;
}

export interface RecombinationSystem extends StiffSystem {
  /** Leaves out the equation of helium once it is neutral for good; its electrons count as none from then on. */
  endHelium(): void;
  readonly heliumActive: boolean;
  readonly fHe: number;
  /** Fills the plasma state that belongs to y at ln a. */
  fill(logA: number, y: Float64Array): PlasmaState;
}

/** Builds the system. He III follows Saha at T_r; x_e solves x_e = x_p + He II + 2 He III in closed form. */
export function recombinationSystem(inputs: SystemInputs): RecombinationSystem {
  const { background, nH0, fHe, without, values } = inputs;
  const T0 = background.cosmology.tCmb;
  const hydrogen = hydrogenCoefficients(values, inputs.alphaFactor, inputs.twoPhotonFactor, without);
  const helium = heliumCoefficients(values, fHe, without);
  const compton = comptonCoefficient(values);
  const saha = sahaCoefficients(values);
  const cools = !without.includes("matter-cooling");
  const double = !without.includes("helium-double-ionisation") && fHe > 0;
  const s = emptyState();
  const expansion = new Float64Array(2);
  // x_e by x_p, by the ionised helium per hydrogen, by ln of the He III Saha factor; d ln(that factor)/d ln a.
  let xeByXp = 1;
  let xeByHelium = 1;
  let xeBySaha = 0;
  let sahaSlope = 0;
  let gammaOverH = 0;
  let heliumActive = true;

  // The state last filled in: the stepper asks for the derivatives where it has just asked for the right-hand side.
  const filled = Float64Array.of(Number.NaN, 0, 0, 0);

  function fill(logA: number, y: Float64Array): PlasmaState {
    if (logA === filled[0] && y[0] === filled[1] && y[1] === filled[2] && y[2] === filled[3]) return s;
    filled[0] = logA;
    filled[1] = y[0];
    filled[2] = y[1];
    filled[3] = y[2];
    const inverseA = Math.exp(-logA);
    background.hubbleAndSlope(logA, expansion, 1 / inverseA);
    const Tr = T0 * inverseA;
    const nH = nH0 * inverseA * inverseA * inverseA;
    const H = expansion[0];
    const eH = Math.exp(-Math.abs(y[0]));
    const major = 1 / (1 + eH);
    const xp = y[0] > 0 ? major : eH * major;
    s.neutralH = y[0] > 0 ? eH * major : major;
    if (heliumActive) {
      const eHe = Math.exp(-Math.abs(y[1]));
      const majorHe = 1 / (1 + eHe);
      s.ionisedHe = y[1] > 0 ? majorHe : eHe * majorHe;
      s.neutralHe = y[1] > 0 ? eHe * majorHe : majorHe;
    } else {
      s.ionisedHe = 0;
      s.neutralHe = 1;
    }
    const ionised = fHe * s.ionisedHe;
    let xe = xp + ionised;
    s.singlyShare = 1;
    s.singlyShareByXe = 0;
    s.singlyShareBySaha = 0;
    xeByXp = 1;
    xeByHelium = 1;
    xeBySaha = 0;
    sahaSlope = 0;
    // Below 40 in the exponent He III is under 1e-12 of helium for every density in range.
    const exponent = saha.he2Ionisation / Tr;
    if (double && exponent < 100) {
      const x = saha.thermal * Tr;
      const factor = (x * Math.sqrt(x) * Math.exp(-exponent)) / nH;
      const b = factor - xe;
      const total = xp + 2 * ionised;
      const root = Math.sqrt(b * b + 4 * factor * total);
      xe = b > 0 ? (2 * factor * total) / (b + root) : (root - b) / 2;
      const sum = xe + factor;
      xeByXp = sum / root;
      xeByHelium = (sum + factor) / root;
      xeBySaha = (factor * (total - xe)) / root;
      s.singlyShare = xe / sum;
      s.singlyShareByXe = factor / (sum * sum);
      s.singlyShareBySaha = (-xe * factor) / (sum * sum);
      sahaSlope = 3 - 1.5 - exponent;
    }
    s.xe = xe;
    s.xp = xp;
    s.nH = nH;
    s.H = H;
    s.Tr = Tr;
    s.Tm = Tr * (1 - y[2]);
    const Tr2 = Tr * Tr;
    gammaOverH = (compton * Tr2 * Tr2 * xe) / (1 + fHe + xe) / H;
    return s;
  }

  const rateH = new Float64Array(RATE.size);
  const rateHe = new Float64Array(RATE.size);
  const J = new Float64Array(9);
  const inverse = new Float64Array(9);

  function rhs(logA: number, y: Float64Array, dydt: Float64Array): void {
    fill(logA, y);
    hydrogenRate(hydrogen, s, false, rateH);
    dydt[0] = rateH[0];
    if (heliumActive) {
      heliumRate(helium, s, false, rateHe);
      dydt[1] = rateHe[0];
    } else dydt[1] = 0;
    dydt[2] = cools ? temperatureRate(y[2], gammaOverH) : 0;
  }

  /** Jacobian row and explicit time derivative from the partials of one rate. */
  function row(r: Float64Array, i: number, cooling: number, dfdt: Float64Array): void {
    J[3 * i] = r[RATE.logitH] + r[RATE.xe] * xeByXp * s.xp * s.neutralH;
    J[3 * i + 1] = r[RATE.logitHe] + r[RATE.xe] * xeByHelium * fHe * s.ionisedHe * s.neutralHe;
    J[3 * i + 2] = -r[RATE.lnTm] / (1 - cooling);
    dfdt[i] =
      (r[RATE.xe] * xeBySaha + r[RATE.lnSaha]) * sahaSlope -
      r[RATE.lnTm] -
      r[RATE.lnTr] -
      3 * r[RATE.lnNH] +
      expansion[1] * r[RATE.lnH];
  }

  /** All first derivatives at once: the Jacobian is kept for {@link solver}. */
  function timeDerivative(logA: number, y: Float64Array, dfdt: Float64Array): void {
    fill(logA, y);
    hydrogenRate(hydrogen, s, true, rateH);
    row(rateH, 0, y[2], dfdt);
    if (heliumActive) {
      heliumRate(helium, s, true, rateHe);
      row(rateHe, 1, y[2], dfdt);
    } else {
      J[3] = J[4] = J[5] = 0;
      dfdt[1] = 0;
    }
    if (cools) {
      const { xe } = s;
      const byXe = (-gammaOverH * y[2] * (1 + fHe)) / (xe * (1 + fHe + xe));
      J[6] = byXe * xeByXp * s.xp * s.neutralH;
      J[7] = byXe * xeByHelium * fHe * s.ionisedHe * s.neutralHe;
      J[8] = -1 - gammaOverH;
      dfdt[2] = byXe * xeBySaha * sahaSlope + gammaOverH * y[2] * (4 + expansion[1]);
    } else {
      J[6] = J[7] = J[8] = 0;
      dfdt[2] = 0;
    }
  }

  const system: RecombinationSystem = {
    n: 3,
    get heliumActive() {
      return heliumActive;
    },
    endHelium() {
      heliumActive = false;
      filled[0] = Number.NaN;
    },
    fHe,
    rhs,
    timeDerivative,
    fill,
    jacobian: copyJacobian,
    solver: shiftedSolver(J, inverse),
  };
  return system;

  function copyJacobian(logA: number, y: Float64Array, dfdy: Float64Array): void {
    timeDerivative(logA, y, new Float64Array(3));
    dfdy.set(J);
  }
}

/** (shift I - J) for three components by its adjugate; J is the one the system has just evaluated. */
function shiftedSolver(J: Float64Array, inverse: Float64Array): ShiftedSolver {
  return {
    update() {},
    factor(shift) {
      const a = shift - J[0];
      const b = -J[1];
      const c = -J[2];
      const d = -J[3];
      const e = shift - J[4];
      const f = -J[5];
      const g = -J[6];
      const h = -J[7];
      const i = shift - J[8];
      const A = e * i - f * h;
      const B = f * g - d * i;
      const C = d * h - e * g;
      const determinant = a * A + b * B + c * C;
      if (!(Math.abs(determinant) > 0 && Math.abs(determinant) < Number.POSITIVE_INFINITY)) return false;
      const w = 1 / determinant;
      inverse[0] = A * w;
      inverse[1] = (c * h - b * i) * w;
      inverse[2] = (b * f - c * e) * w;
      inverse[3] = B * w;
      inverse[4] = (a * i - c * g) * w;
      inverse[5] = (c * d - a * f) * w;
      inverse[6] = C * w;
      inverse[7] = (b * g - a * h) * w;
      inverse[8] = (a * e - b * d) * w;
      return true;
    },
    solve(r) {
      const x = r[0];
      const y = r[1];
      const z = r[2];
      r[0] = inverse[0] * x + inverse[1] * y + inverse[2] * z;
      r[1] = inverse[3] * x + inverse[4] * y + inverse[5] * z;
      r[2] = inverse[6] * x + inverse[7] * y + inverse[8] * z;
    },
  };
}
