/** The n <-> p rates at one temperature, normalised to the neutron mean life with the same corrections at T = 0. */
import { CalculationError, requireFinite, requirePositive } from "../numerics/check.ts";
import { checkWeakInputs, WEAK_INPUTS, type WeakInputs, type WeakOptions } from "./inputs.ts";
import { createPanelStore, type Panel, type PanelStore, STRIDE } from "./panels.ts";

/** Rates in units of 1/tau_n; multiply by 1/tau_n [1/s]. */
export interface WeakRates {
  /** Gamma(n -> p) tau_n; tends to 1 for T -> 0. */
  readonly nToP: number;
  /** Gamma(p -> n) tau_n; falls as exp(-Q/T) and underflows to 0 below about 0.0018 MeV. */
  readonly pToN: number;
}

/** Logarithms of the rates, finite at any temperature. */
export interface LogWeakRates {
  readonly lnNToP: number;
  readonly lnPToN: number;
}

/** Weak rates with one set of switches and constants; energy nodes are prepared as temperatures ask for them. */
export interface WeakKernel {
  readonly options: WeakOptions;
  readonly inputs: WeakInputs;
  /** lambda_0 [m_e^5], see {@link decayPhaseSpace}. */
  readonly phaseSpace: number;
  /** As {@link weakRatesAt}, without its checks of the arguments. */
  logRates(TMeV: number, TnuMeV: number, xiE: number): LogWeakRates;
}

/** Gauss points in a panel: 8 give the integrals to 2e-8 (unit test: doubling the nodes). */
const POINTS = 8;
/** What is suppressed by more than e^-36 is left out: energies beyond 36 T (and the Fermi surface), positrons below m_e/36. */
const CUT = 36;
/** Coarsest head panel, in levels of Q - m_e (0.2 MeV): no panel is wider than its distance from p = 0 and E = 0. */
const COARSEST = -2;
/** Head panel that resolves the end point of the electron spectrum at T = 0. */
const DECAY_LEVEL = -6;

const kernels = new WeakMap<WeakInputs, Map<string, WeakKernel>>();

/**
 * The kernel of a set of switches, made once for each object of inputs and kept as long as that lives.
 * @param inputs constants, CODATA 2022 and PDG unless given
 * @param points Gauss points in a panel (for tests of convergence)
 * @throws {RangeError} if a constant is out of its domain
 */
export function weakKernel(
  options: WeakOptions,
  inputs: WeakInputs = WEAK_INPUTS,
  points: number = POINTS,
): WeakKernel {
  const { coulomb, radiative, finiteMass } = options;
  const weakMagnetism = finiteMass && options.weakMagnetism;
  let kept = kernels.get(inputs);
  if (!kept) {
    kept = new Map();
    kernels.set(inputs, kept);
  }
  const key = [coulomb, radiative, finiteMass, weakMagnetism, points].join();
  let kernel = kept.get(key);
  if (!kernel) {
    kernel = createKernel({ coulomb, radiative, finiteMass, weakMagnetism }, inputs, points);
    kept.set(key, kernel);
  }
  return kernel;
}

/**
 * n -> p and p -> n rates, all three channels each way (n <-> p e- nubar, n nu <-> p e-, n e+ <-> p nubar), in units of
 * 1/tau_n: Gamma tau_n = (1/lambda_0) int p^2 dp sum_(+-E) ..., see {@link Integrand}.
 * Electrons have zero chemical potential; nucleons move thermally at TMeV if finiteMass is on.
 *
 * @param TMeV  photon and electron temperature [MeV], > 0
 * @param TnuMeV electron-neutrino temperature [MeV], > 0
 * @param xiE   degeneracy mu/T of nu_e; -xiE that of its antineutrino
 * @returns rates; quadrature error below 2e-8 (the physics that is left out is worth 1e-4 in Y_p: corrections.ts)
 * @throws {RangeError} if a temperature is not positive and finite or xiE not finite
 * @throws {CalculationError} if the 1/M expansion breaks down (negative p -> n rate: T_nu above T far below 0.01 MeV)
 * @see Weinberg 1972, Gravitation and Cosmology, sec. 15.7; corrections.ts for the sources of each correction
 */
export function weakRatesAt(
  TMeV: number,
  TnuMeV: number,
  xiE: number,
  options: WeakOptions,
  inputs: WeakInputs = WEAK_INPUTS,
): WeakRates {
  checkState(TMeV, TnuMeV, xiE);
  const { lnNToP, lnPToN } = weakKernel(options, inputs).logRates(TMeV, TnuMeV, xiE);
  return { nToP: Math.exp(lnNToP), pToN: Math.exp(lnPToN) };
}

/**
 * Phase space of free neutron decay lambda_0 = m_e^-5 int p^2 dp k^2 (corrections at T = 0) [m_e^5]: the
 * normalisation of the rates, 1/tau_n = G_F^2 V_ud^2 (1 + 3 gA^2) m_e^5 lambda_0/(2 pi^3).
 * @returns 1.636099 at Born level, 1.754753 with all corrections; quadrature error below 1e-8
 */
export function decayPhaseSpace(options: WeakOptions, inputs: WeakInputs = WEAK_INPUTS): number {
  return weakKernel(options, inputs).phaseSpace;
}

/** @throws {RangeError} if a temperature is not positive and finite or xiE not finite */
export function checkState(TMeV: number, TnuMeV: number, xiE: number): void {
  requirePositive("TMeV", TMeV, "MeV");
  requirePositive("TnuMeV", TnuMeV, "MeV");
  requireFinite("xiE", xiE, "");
}

function createKernel(options: WeakOptions, inputs: WeakInputs, points: number): WeakKernel {
  checkWeakInputs(inputs);
  const store = createPanelStore(options, inputs, points);
  const decay = atZeroTemperature(store);
  const sums = new Float64Array(2);
  return {
    options,
    inputs,
    phaseSpace: decay / inputs.electronMass ** 5,
    logRates(TMeV, TnuMeV, xiE) {
      integrate(store, inputs, TMeV, TnuMeV, xiE, sums);
      const [n, p] = sums;
      if (!(n > 0 && p > 0))
        throw new CalculationError(
          "weak",
          `weak rates at T = ${TMeV} MeV, T_nu = ${TnuMeV} MeV, xi = ${xiE}: the first-order 1/M terms do not hold here`,
        );
      return {
        lnNToP: Math.log(n / decay),
        lnPToN: Math.log(p / decay) - inputs.Q / Math.max(TMeV, TnuMeV),
      };
    },
  };
}

/** Phase space of decay: antineutrino states all free (f = 1), no electron to block [MeV^5]. */
function atZeroTemperature(store: PanelStore): number {
  let sum = 0;
  for (let level = DECAY_LEVEL; level <= 0; level++) {
    const { count, data } =
      level === DECAY_LEVEL ? store.head("antineutrino", level) : store.body("antineutrino", level);
    for (let i = 0; i < count; i++) sum += data[i * STRIDE + 2];
  }
  return sum;
}

/** Sums of n -> p [MeV^5] and of p -> n times exp(Q/max(T, T_nu)) [MeV^5] over the panels that matter at (T, T_nu). */
function integrate(
  store: PanelStore,
  inputs: WeakInputs,
  T: number,
  Tnu: number,
  xi: number,
  sums: Float64Array,
): void {
  const lower = Math.floor(Math.log2(Math.min(T, Tnu) / store.scale));
  const first = Math.min(COARSEST, lower);
  const reach = (CUT + Math.abs(xi)) * Math.max(T, Tnu);
  const last = Math.max(first, Math.ceil(Math.log2(reach / store.scale)));
  const state: State = { T, Tnu, xi, Q: inputs.Q, bound: inputs.Q / Math.max(T, Tnu) };
  const positrons = inputs.electronMass < CUT * Math.max(T, Tnu);
  sums.fill(0);
  addNeutrino(store.head("neutrino", first), state, sums);
  addAntineutrino(store.head("antineutrino", first), state, sums);
  if (positrons) addPositron(store.head("positron", first), state, sums);
  for (let level = first + 1; level <= last; level++) {
    addNeutrino(store.body("neutrino", level), state, sums);
    if (level <= 0) addAntineutrino(store.body("antineutrino", level), state, sums);
    if (positrons) addPositron(store.body("positron", level), state, sums);
  }
  for (let level = last + 1; level <= 0; level++) addAntineutrino(store.body("antineutrino", level), state, sums);
}

interface State {
  readonly T: number;
  readonly Tnu: number;
  readonly xi: number;
  readonly Q: number;
  /** Q/max(T, T_nu): p -> n carries the factor exp(-bound), divided out so that nothing underflows. */
  readonly bound: number;
}

/** n nu <-> p e-: E = Q + x, k = x. */
function addNeutrino({ count, data }: Panel, { T, Tnu, xi, Q, bound }: State, sums: Float64Array): void {
  const boltzmann = Math.exp(-Q / T);
  const scaled = Math.exp(bound - Q / T);
  for (let i = 0, o = 0; i < count; i++, o += STRIDE) {
    const x = data[o];
    const ex = Math.exp(-x / T);
    const z = Math.exp(xi - x / Tnu);
    const free = 1 / (1 + ex * boltzmann); // 1 - f_e(E)
    const hole = 1 / (1 + z); // 1 - f(k)
    addNode(data, o, T, Tnu, z * hole, hole, free, scaled * ex * free * hole, sums);
  }
}

/** n <-> p e- nubar: E = Q - x, k = -x. */
function addAntineutrino({ count, data }: Panel, { T, Tnu, xi, Q, bound }: State, sums: Float64Array): void {
  const difference = 1 / T - 1 / Tnu;
  const offset = bound - Q / T - xi;
  for (let i = 0, o = 0; i < count; i++, o += STRIDE) {
    const x = data[o];
    const z = Math.exp(-xi - x / Tnu);
    const free = 1 / (1 + Math.exp(-data[o + 1] / T));
    const f = 1 / (1 + z);
    addNode(data, o, T, Tnu, f, z * f, free, Math.exp(offset + x * difference) * free * f, sums);
  }
}

/** n e+ <-> p nubar: positron energy m_e + x, k = -(m_e + x + Q). */
function addPositron({ count, data }: Panel, { T, Tnu, xi, Q, bound }: State, sums: Float64Array): void {
  const unscale = Math.exp(-bound);
  for (let i = 0, o = 0; i < count; i++, o += STRIDE) {
    const energy = data[o + 1];
    const e = Math.exp(-energy / T);
    const z = Math.exp(bound - xi - (energy + Q) / Tnu);
    const free = 1 / (1 + e); // no positron there
    const f = 1 / (1 + z * unscale);
    addNode(data, o, T, Tnu, f, z * unscale * f, e * free, z * f * free, sums);
  }
}

/**
 * Adds one node: n -> p with df/dk = -f (1 - f)/T_nu, d2f/dk2 = f (1 - f)(1 - 2f)/T_nu^2, p -> n with h = 1 - f.
 * @param weightN leptons' statistical factor of n -> p without f
 * @param weightP the same of p -> n, with h, scaled
 */
function addNode(
  data: Float64Array,
  o: number,
  T: number,
  Tnu: number,
  f: number,
  h: number,
  weightN: number,
  weightP: number,
  sums: Float64Array,
): void {
  const asymmetry = (h - f) / Tnu; // (1 - 2f)/T_nu
  const n0 = data[o + 2] + T * data[o + 3];
  const n1 = data[o + 4] + T * data[o + 5] - T * data[o + 6] * asymmetry;
  const p0 = data[o + 7] + T * data[o + 8];
  const p1 = data[o + 9] + T * data[o + 10] - T * data[o + 11] * asymmetry;
  sums[0] += weightN * f * (n0 - (n1 * h) / Tnu);
  sums[1] += weightP * (p0 + (p1 * f) / Tnu);
}
