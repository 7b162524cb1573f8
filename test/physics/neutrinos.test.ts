/** Neutrino decoupling against published and independently computed N_eff. */
import { expect, test } from "vitest";
import { computeThermalHistory } from "../../src/background/history.ts";

const standard = computeThermalHistory();

test("N_eff of three temperatures agrees with published full calculations to 0.002", () => {
  // Bennett et al. 2021, JCAP 04, 073 (arXiv:2012.02726): 3.0440(2); Froustey, Pitrou & Volpe 2020, JCAP 12, 015
  // (arXiv:2008.01074): 3.0440; Escudero 2020, JCAP 05, 048 (arXiv:2001.04466), thermal distributions: 3.045
  for (const published of [3.044, 3.045]) expect(Math.abs(standard.nEffComputed - published)).toBeLessThan(0.002);
});

test("N_eff, dark radiation and final temperature ratio agree with an independent calculation made for this project", () => {
  expect(Math.abs(standard.nEffComputed - 3.0443)).toBeLessThan(1e-4);
  expect(Math.abs(standard.photonToNeutrinoTemperature - 1.3946)).toBeLessThan(1e-4);
  expect(Math.abs(computeThermalHistory({ deltaNEff: -1 }).nEffComputed - 2.0462)).toBeLessThan(1e-4);
  expect(Math.abs(computeThermalHistory({ deltaNEff: 1 }).nEffComputed - 4.0427)).toBeLessThan(1e-4);
});

// Independent calculation made for this project: instantaneous decoupling at 20 MeV, QED terms switched on one by one
test.each<[string, boolean, boolean, number]>([
  ["no QED", false, false, 3.0002],
  ["QED to e^2", true, false, 3.0108],
  ["QED to e^3", true, true, 3.0098],
])("instantaneous decoupling at 20 MeV, %s: N_eff = %d", (_name, qedE2, qedE3, expected) => {
  const { nEffComputed } = computeThermalHistory({ incompleteDecoupling: false, qedE2, qedE3 });
  expect(Math.abs(nEffComputed - expected)).toBeLessThan(1e-4);
});

test("instantaneous decoupling at T >> m_e reproduces the massless QED shifts of N_eff", () => {
  // 3 (1 - 25 e^2/(88 pi^2))^(-4/3) = 3.01059 from P2 = -5 e^2 T^4/288, 3.00965 with P3 = e^3 T^4/(36 sqrt(3) pi); abs 2e-4.
  // Published shifts +0.010 and -0.001: Bennett et al. 2020, JCAP 03, 003 (arXiv:1911.04504)
  const at = (qedE2: boolean, qedE3: boolean) =>
    computeThermalHistory({ incompleteDecoupling: false, startMeV: 500, qedE2, qedE3 }).nEffComputed;
  expect(Math.abs(at(false, false) - 3)).toBeLessThan(1e-6);
  expect(Math.abs(at(true, false) - 3.01059)).toBeLessThan(1e-5);
  expect(Math.abs(at(true, true) - 3.00965)).toBeLessThan(1e-5);
});

test("electron neutrinos are heated more than the others, all less than the photons", () => {
  const last = standard.s.length - 1;
  const decoupled = computeThermalHistory({ incompleteDecoupling: false });
  expect(standard.TnueOverT[last]).toBeGreaterThan(standard.TnumuOverT[last]);
  expect(standard.TnumuOverT[last]).toBeGreaterThan(decoupled.TnumuOverT[last]);
  expect(standard.TnueOverT[last]).toBeLessThan(1);
});

test("n_b a^3 is fixed by the final a T: the early Universe has 1.398 times less of it", () => {
  expect(Math.cbrt(standard.heating[0])).toBeCloseTo(1.398, 3);
});
