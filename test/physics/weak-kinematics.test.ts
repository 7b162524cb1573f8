/** First-order 1/M terms of the weak rates against exact relativistic kinematics, by quadratures that share no formula. */
import { expect, test } from "vitest";
import { gaussLegendre, integratePanels } from "../../src/numerics/quadrature.ts";
import { finiteMassIntegrand } from "../../src/weak/corrections.ts";
import { WEAK_INPUTS, type WeakInputs } from "../../src/weak/inputs.ts";
import { decayPhaseSpace } from "../../src/weak/rates.ts";

/** g_A of the quoted numbers. */
const INPUTS: WeakInputs = { ...WEAK_INPUTS, gA: 1.2756 };
const { Q, electronMass: m } = INPUTS;

/** Nucleons `factor` times heavier, same Q. */
const heavier = (factor: number): WeakInputs => ({ ...INPUTS, protonMass: factor * INPUTS.protonMass });
const fermi = (x: number) => 1 / (Math.exp(x) + 1);

type Channel = "neutrino" | "positron";

interface Couplings {
  readonly LL: number;
  readonly RR: number;
  readonly LR: number;
}

/** Couplings of the squared matrix element, divided by S = (1 + 3 gA^2)/4; weak magnetism to the order that 1/M keeps. */
function couplings({ gA, magnetism }: WeakInputs, weakMagnetism: boolean): Couplings {
  const S = (1 + 3 * gA * gA) / 4;
  const f = weakMagnetism ? magnetism * gA : 0;
  return { LL: ((1 + gA) ** 2 / 4 + f) / S, RR: ((1 - gA) ** 2 / 4 - f) / S, LR: (gA * gA - 1) / 4 / S };
}

/** Gauss nodes over consecutive panels. */
function nodesOf(edges: readonly number[], points: number): { x: number; w: number }[] {
  const { nodes, weights } = gaussLegendre(points);
  return edges.slice(1).flatMap((hi, j) =>
    Array.from({ length: points }, (_, i) => ({
      x: edges[j] + ((hi - edges[j]) * (1 + nodes[i])) / 2,
      w: (weights[i] * (hi - edges[j])) / 2,
    })),
  );
}

/**
 * Exact rate of n + a -> p + b over its infinite-mass limit, neutron momenta exp(-P^2/2 m_n T) (the relativistic
 * distribution changes the ratio by 1.3e-5 at 1 MeV, order M^-2), all temperatures equal: a = nu, b = e- or a = e+, b = nubar. Squared matrix element of V - gA A:
 * W = LL (n.nu)(p.e) + RR (n.e)(p.nu) + LR m_n m_p (e.nu), four-products; crossing leaves it as it is.
 * The final pair is built in the centre of mass and boosted back.
 */
function exactOverBorn(T: number, inputs: WeakInputs, channel: Channel, weakMagnetism: boolean): number {
  const c = couplings(inputs, weakMagnetism);
  const mp = inputs.protonMass;
  const mn = mp + Q;
  const incoming = channel === "neutrino" ? 0 : m;
  const outgoing = channel === "neutrino" ? m : 0;
  const energies = nodesOf(
    [0, 1, 2, 4, 7, 12, 20, 36].map((x) => Math.sqrt(x * T)),
    8,
  );
  const angles = nodesOf([-1, 1], 6);
  const azimuths = Array.from({ length: 4 }, (_, j) => (Math.PI * (j + 0.5)) / 2);
  const thermal = Math.sqrt(mn * T);
  const momenta = nodesOf([0, 2.5 * thermal, 6.5 * thermal], 7);
  const maxwell = (P: number) => P * P * Math.exp(-(P * P) / (2 * mn * T));
  const density = momenta.reduce((sum, { x, w }) => sum + w * maxwell(x), 0);
  let exact = 0;
  let born = 0;
  for (const { x: root, w: wRoot } of energies) {
    const Ea = incoming + root * root;
    const pa = Math.sqrt(root * root * (Ea + incoming));
    const weight = wRoot * 2 * root * pa * Ea * fermi(Ea / T); // d^3p_a f_a
    const Eb = Ea + Q;
    const pb = Math.sqrt((Eb - outgoing) * (Eb + outgoing));
    born += weight * pb * Eb * (1 - fermi(Eb / T));
    for (const { x: P, w: wP } of momenta) {
      const En = Math.hypot(P, mn);
      for (const { x: mu, w: wMu } of angles) {
        // neutron along z, a in the x-z plane
        const ax = pa * Math.sqrt(1 - mu * mu);
        const az = pa * mu;
        const E = En + Ea;
        const [Kx, Kz] = [ax, P + az];
        const s = E * E - Kx * Kx - Kz * Kz;
        const sqrtS = Math.sqrt(s);
        const EbCm = (s + outgoing * outgoing - mp * mp) / (2 * sqrtS);
        const pCm = Math.sqrt(EbCm * EbCm - outgoing * outgoing);
        let sum = 0;
        for (const { x: cos, w: wCos } of angles)
          for (const phi of azimuths) {
            const sin = Math.sqrt(1 - cos * cos);
            const [qx, qz] = [pCm * sin * Math.cos(phi), pCm * cos]; // y drops out of all products
            // boost of (EbCm, q) with velocity K/E
            const along = (Kx * qx + Kz * qz) / sqrtS;
            const energy = (E * EbCm) / sqrtS + along;
            const shift = (EbCm + along / (E / sqrtS + 1)) / sqrtS;
            const [bx, bz] = [qx + Kx * shift, qz + Kz * shift];
            const nDotA = En * Ea - P * az;
            const nDotB = En * energy - P * bz;
            const aDotB = Ea * energy - ax * bx - az * bz;
            // p = n + a - b, so p.x = n.x + a.x - b.x
            const pDotA = nDotA + incoming * incoming - aDotB;
            const pDotB = nDotB + aDotB - outgoing * outgoing;
            const [nNu, pE, nE, pNu] =
              channel === "neutrino" ? [nDotA, pDotB, nDotB, pDotA] : [nDotB, pDotA, nDotA, pDotB];
            const W = c.LL * nNu * pE + c.RR * nE * pNu + c.LR * mn * mp * aDotB;
            sum += wCos * W * (1 - fermi(energy / T));
          }
        const average = sum / (2 * azimuths.length);
        exact += (weight * (wP * maxwell(P)) * (wMu / 2) * average * pCm) / (density * En * Ea * sqrtS);
      }
    }
  }
  return exact / born;
}

/** The first-order terms of the same channel over its Born rate. */
function formulaOverBorn(T: number, inputs: WeakInputs, channel: Channel, weakMagnetism: boolean): number {
  let corrected = 0;
  let born = 0;
  for (const { x: root, w } of nodesOf(
    [0, 1, 2, 4, 7, 12, 20, 36].map((x) => Math.sqrt(x * T)),
    16,
  )) {
    const E = channel === "neutrino" ? Q + root * root : -(m + root * root);
    const k = E - Q;
    const f = fermi(k / T);
    const g = f * (1 - f);
    const { n0, n1, n2 } = finiteMassIntegrand(E, weakMagnetism, inputs);
    const bracket = (n0[0] + T * n0[1]) * f - ((n1[0] + T * n1[1]) * g) / T + (T * n2 * g * (1 - 2 * f)) / T ** 2;
    const weight = w * 2 * root * Math.sqrt(E * E - m * m) * Math.abs(E) * fermi(-E / T);
    corrected += weight * bracket;
    born += weight * k * k * f;
  }
  return corrected / born;
}

// Independent quadrature made for this project, weak magnetism included: exact +0.01064, first order +0.01094 at 1 MeV;
// nucleons four times heavier +0.00272, +0.00274. Tolerance: half of the last printed digit and the rounding of g_A.
test.each([
  [1, 0.01064, 0.01094],
  [4, 0.00272, 0.00274],
])("n nu -> p e- at 1 MeV, nucleon mass times %f: exact kinematics %f, first order %f", (factor, exact, first) => {
  expect(Math.abs(exactOverBorn(1, heavier(factor), "neutrino", true) - 1 - exact)).toBeLessThan(6e-6);
  expect(Math.abs(formulaOverBorn(1, heavier(factor), "neutrino", true) - 1 - first)).toBeLessThan(6e-6);
});

test.each([
  ["neutrino", 1, true],
  ["neutrino", 0.5, false],
  ["positron", 1, false],
  ["positron", 0.5, true],
] as const)(
  "the residual of the first order falls as M^-2: %s channel at %f MeV, weak magnetism %s",
  (channel, T, wm) => {
    const first = (factor: number) => formulaOverBorn(T, heavier(factor), channel, wm);
    const residual = (factor: number) => exactOverBorn(T, heavier(factor), channel, wm) - first(factor);
    const order = Math.log(residual(4) / residual(16)) / Math.log(4);
    expect(Math.abs(order - 2)).toBeLessThan(0.2);
    expect(Math.abs(residual(1) / (first(1) - 1))).toBeLessThan(0.1); // the next order is E/M of the first, E < 0.1 M
  },
);

// Independent quadrature made for this project: exact three-body phase space -0.0020637, first order -0.0020662.
test("neutron decay: exact three-body phase space -0.0020637, first order -0.0020662", () => {
  const { LL, RR, LR } = couplings(INPUTS, false);
  const mp = INPUTS.protonMass;
  const mn = mp + Q;
  const end = (mn * mn + m * m - mp * mp) / (2 * mn);
  // dGamma ~ W dE_e dE_nu/m_n over the Dalitz region, its borders from proton momentum p_e +- p_nu
  const spectrum = (E: number) => {
    const p = Math.sqrt(E * E - m * m);
    const border = (sign: 1 | -1) => (mn * (end - E)) / (mn - E + sign * p);
    return integratePanels(
      (k) => {
        const nNu = mn * k;
        const nE = mn * E;
        const pE = (mn * mn - 2 * nNu - mp * mp - m * m) / 2;
        const pNu = (mn * mn - 2 * nE + m * m - mp * mp) / 2;
        const eNu = (mn * mn + mp * mp - 2 * mn * (mn - E - k) - m * m) / 2;
        return (LL * nNu * pE + RR * nE * pNu + LR * mn * mp * eNu) / mn;
      },
      [border(1), border(-1)],
      6,
    );
  };
  const root = Math.sqrt(end - m);
  const exact = integratePanels((u) => 2 * u * spectrum(m + u * u), [0, root / 2, root], 30) / 2 / m ** 5;
  const born = { coulomb: false, radiative: false, finiteMass: false, weakMagnetism: false };
  const lambda0 = decayPhaseSpace(born, INPUTS);
  expect(Math.abs(exact / lambda0 - 1 + 0.0020637)).toBeLessThan(1e-7);
  const first = decayPhaseSpace({ ...born, finiteMass: true }, INPUTS) / lambda0 - 1;
  expect(Math.abs(first + 0.0020662)).toBeLessThan(1e-7);
});
