/** The ionisation history: Saha equilibrium while it holds, then the three-level atom, from early times to today. */
import { type LateBackground, lateBackground, unitDensity } from "../background/expansion.ts";
import { GRAM_PER_U } from "../constants/units.ts";
import { CalculationError } from "../numerics/check.ts";
import { localPolynomials } from "../numerics/local-polynomial.ts";
import { type SolverCounts, StiffStepper, type StiffSystem } from "../numerics/ode-stiff.ts";
import { heliumMassFraction } from "../parameters/helium.ts";
import { RECOMBINATION_VALUES } from "./atomic.ts";
import { checkSwitches, RECOMBINATION_TOLERANCE, type RecombinationInputs } from "./inputs.ts";
import { comptonCoefficient, temperatureRate } from "./matter-temperature.ts";
import { sahaCoefficients, sahaEquilibrium } from "./saha.ts";
import { type RecombinationSystem, recombinationSystem, Y } from "./system.ts";

/** Highest redshift of the tables. */
export const Z_TOP = 1e4;

/** Above this redshift, where helium is ionised twice but for 1e-9 of it, x_e is taken as constant. */
const Z_FULL = 2e4;

/** Departure of x_e from equilibrium (relative) below which the equations are not yet integrated. */
const EQUILIBRIUM_LAG = 1e-10;

/** Largest tolerance of a component that hardly moves x_e, unless the tolerance itself is larger. */
const LOOSEST = 1e-3;

/** Ionised share of helium at which its equation ends and its electrons count as none. */
const HELIUM_END = 1e-9;

/** Recombination without reionisation. */
export interface IonisationHistory {
  readonly inputs: RecombinationInputs;
  readonly background: LateBackground;
  /** Hydrogen nuclei today [cm^-3]. */
  readonly nH0: number;
  /** Equilibrium holds above this redshift; the integration starts here. */
  readonly zStart: number;
  /** Accepted steps as ln(1 + z), ascending from 0: between them the solution is smooth. */
  readonly logZ: Float64Array;
  readonly counts: Readonly<SolverCounts>;
  readonly tolerance: number;
  /** x_e at ln(1 + z), >= 0. */
  xeAt(logZ: number, interval?: number): number;
  /** T_m/T_r at ln(1 + z), >= 0. */
  temperatureRatioAt(logZ: number): number;
  /** x_e of Saha equilibrium in the same cosmology. */
  sahaXe(z: number): number;
}

/**
 * Ionisation and matter temperature from equilibrium to z = 0.
 * Accuracy: `tolerance` bounds the local error of x_e; at the default the error of x_e is below 5e-7 for 0 <= z <= 1e4.
 *
 * @throws {InputError} for unknown switches or a cosmology that is refused
 * @throws {CalculationError} if the integration fails, with its place
 */
export function computeIonisationHistory(inputs: RecombinationInputs): IonisationHistory {
  checkSwitches(inputs.without, inputs.model);
  const values = inputs.values ?? RECOMBINATION_VALUES;
  const background = lateBackground(inputs, values.newtonG);
  const hydrogenShare = 1 - heliumMassFraction(inputs.fHe, values.heliumMass / values.hydrogenMass);
  const nH0 = (hydrogenShare * inputs.omegaB * unitDensity(values.newtonG)) / (values.hydrogenMass * GRAM_PER_U);
  const saha = sahaCoefficients(values);
  const double = !inputs.without.includes("helium-double-ionisation");
  const equilibrium = (z: number) =>
    sahaEquilibrium(inputs.tCmb * (1 + z), nH0 * (1 + z) ** 3, inputs.fHe, saha, double);
  const common = { inputs, background, nH0, sahaXe: (z: number) => equilibrium(z).xe };
  const cools = !inputs.without.includes("matter-cooling");
  const gammaOverH = comptonOverExpansion(inputs, background);
  // Quasi-steady 1 - T_m/T_r while Compton heating is fast.
  const steadyCooling = (z: number) => (cools ? 1 / (1 + gammaOverH(z, equilibrium(z).xe)) : 0);
  const solution = inputs.model === "saha" ? integrateSaha() : integrateThreeLevel();
  const { logZ, zStart, counts, tolerance } = solution;
  const logStart = Math.log1p(zStart);
  const logFull = Math.log1p(Z_FULL);
  const fullyIonised = equilibrium(Z_FULL).xe;
  const equilibriumAt = (x: number) => (x > logFull ? fullyIonised : equilibrium(Math.expm1(x)).xe);
  const [logXe, logitCooling] = localPolynomials(logZ, [solution.logXe, solution.logitCooling]);
  return {
    ...common,
    zStart,
    logZ,
    counts,
    tolerance,
    xeAt:
      inputs.model === "saha"
        ? equilibriumAt
        : (x, interval) => (x > logStart ? equilibriumAt(x) : Math.exp(logXe.value(x, interval))),
    temperatureRatioAt: (x) =>
      x > logStart ? 1 - steadyCooling(Math.expm1(x)) : cools ? 1 / (1 + Math.exp(logitCooling.value(x))) : 1,
  };

  function integrateThreeLevel() {
    const system = recombinationSystem({
      background,
      nH0,
      fHe: inputs.fHe,
      alphaFactor: inputs.alphaFactor,
      twoPhotonFactor: inputs.lambda2s ?? 1,
      without: inputs.without,
      values,
    });
    const y0 = new Float64Array(Y.size);
    const startAt = (z: number) => {
      const e = equilibrium(z);
      y0[Y.hydrogen] = Math.log(e.xp / e.neutralH);
      y0[Y.helium] = Math.log((e.he2 + e.he3) / e.he1);
      y0[Y.cooling] = steadyCooling(z);
    };
    const zStart = lastEquilibrium(system, startAt, y0);
    startAt(zStart);
    return { zStart, ...collect(system, y0, zStart, system) };
  }

  function integrateSaha() {
    const rate = new Float64Array(1);
    const system: StiffSystem = {
      n: 1,
      rhs(logA, y, dydt) {
        const z = Math.expm1(-logA);
        dydt[0] = temperatureRate(y[0], gammaOverH(z, equilibrium(z).xe));
      },
      jacobian(logA, _y, dfdy) {
        const z = Math.expm1(-logA);
        dfdy[0] = -1 - gammaOverH(z, equilibrium(z).xe);
      },
    };
    const zStart = 3000;
    rate[0] = steadyCooling(zStart);
    return { zStart, ...collect(system, cools ? rate : new Float64Array(1), zStart) };
  }

  /** Integrates to today, keeping every accepted step, in ascending ln(1 + z). */
  function collect(system: StiffSystem, y0: Float64Array, zStart: number, full?: RecombinationSystem) {
    const tolerance = inputs.tolerance ?? RECOMBINATION_TOLERANCE;
    const atol = new Float64Array(system.n).fill(tolerance);
    if (full) atol[Y.cooling] = Math.min(10 * tolerance, Math.max(tolerance, LOOSEST));
    const widest = Math.min(1e3, Math.max(1, LOOSEST / tolerance));
    const start = -Math.log1p(zStart);
    const stepper = new StiffStepper(system, start, y0, 0, {
      rtol: 0,
      atol,
      method: "rodas5p",
      firstStep: 1e-3,
      maxStep: 0.1,
    });
    const logZ: number[] = [];
    const logXe: number[] = [];
    const logitCooling: number[] = [];
    const keep = () => {
      logZ.push(-stepper.t);
      const u = stepper.y[full ? Y.cooling : 0];
      if (!(u < 1)) throw new CalculationError("matter-temperature", `T_m <= 0 at z = ${Math.expm1(-stepper.t)}`);
      // The logit keeps T_m/T_r between 0 and 1 however loose the tolerance.
      logitCooling.push(Math.log(Math.max(u, 1e-14) / (1 - u)));
      if (!full) {
        logXe.push(0);
        return;
      }
      const s = full.fill(stepper.t, stepper.y);
      logXe.push(Math.log(s.xe));
      // The logits matter as far as they move x_e: weight their tolerances by d(logit)/d ln x_e, within a factor 1e3
      // and never above LOOSEST, since the weights are those of the step's start.
      const electronsH = s.xp * s.neutralH;
      const electronsHe = inputs.fHe * s.ionisedHe * s.neutralHe;
      atol[Y.hydrogen] = tolerance * Math.min(widest, s.xe / Math.max(electronsH, 1e-300));
      atol[Y.helium] = tolerance * Math.min(widest, s.xe / Math.max(electronsHe, 1e-300));
    };
    keep();
    while (!stepper.done) {
      stepper.step();
      if (full?.heliumActive && stepper.y[Y.helium] < Math.log(HELIUM_END)) full.endHelium();
      keep();
    }
    return {
      logZ: Float64Array.from(logZ.reverse()),
      logXe: logXe.reverse(),
      logitCooling: logitCooling.reverse(),
      counts: stepper.counts,
      tolerance,
    };
  }
}

/** Gamma/H of Compton heating as a function of redshift and x_e. */
function comptonOverExpansion(inputs: RecombinationInputs, background: LateBackground) {
  const compton = comptonCoefficient(inputs.values ?? RECOMBINATION_VALUES);
  return (z: number, xe: number) =>
    (compton * (inputs.tCmb * (1 + z)) ** 4 * xe) / (1 + inputs.fHe + xe) / background.hubble(z);
}

/**
 * Lowest redshift, going down from Z_TOP by 5 %, at which x_e still follows equilibrium: the equilibrium logits move
 * with d(logit)/d ln a = -(df/dt)/(df/dy), so they lag by that over the relaxation rate |df/dy|.
 */
function lastEquilibrium(system: RecombinationSystem, startAt: (z: number) => void, y0: Float64Array): number {
  const J = new Float64Array(9);
  const dfdt = new Float64Array(3);
  let last = Z_TOP;
  for (let z = Z_TOP; z > 100; z = (1 + z) / 1.05 - 1) {
    startAt(z);
    const logA = -Math.log1p(z);
    system.jacobian?.(logA, y0, J);
    system.timeDerivative?.(logA, y0, dfdt);
    const s = system.fill(logA, y0);
    const lag = (i: number, electrons: number) => (Math.abs(dfdt[i]) / J[4 * i] ** 2) * (electrons / s.xe);
    const lagH = lag(Y.hydrogen, s.xp * s.neutralH);
    const lagHe = lag(Y.helium, system.fHe * s.ionisedHe * s.neutralHe);
    if (!(lagH + lagHe < EQUILIBRIUM_LAG)) break;
    last = z;
  }
  return last;
}
