/** Reactions: ids, conservation, Q-values; names as people write them. */
import { describe, expect, test } from "vitest";
import { loadRates } from "../../../src/node/load-rates.ts";
import { makeReaction, parseEquation, parseReactionId, qValueMeV } from "../../../src/nuclear/reaction.ts";
import {
  formatReaction,
  parseReactionName,
  resolveReaction,
  suggestNearest,
} from "../../../src/nuclear/reaction-name.ts";

const library = loadRates();

test("every reaction of the library reads back from id, equation and display", () => {
  expect(library.reactions.length).toBe(180);
  for (const id of library.reactions) {
    const reaction = parseReactionId(id);
    expect(reaction.id).toBe(id);
    expect(parseEquation(reaction.equation)).toEqual(reaction);
    expect(parseReactionName(formatReaction(id))).toBe(id);
  }
});

test.each([
  ["t + d -> he4 + n", "t-d_n-he4"],
  ["d + t → n + he4", "t-d_n-he4"],
  ["he4 + t -> li7 + gamma", "t-he4_gamma-li7"],
  ["he4 + li6 -> b10", "li6-he4_gamma-b10"],
  ["n + p + he4 -> li6", "he4-p-n_gamma-li6"],
  ["t + he3 -> n + p + he4", "he3-t_n-p-he4"],
  ["t -> he3", "t_he3"],
  ["li8 -> he4 + he4", "li8_he4-he4"],
])("%s has the id %s", (equation, id) => {
  expect(parseEquation(equation).id).toBe(id);
});

test.each([
  ["t + d -> he4", /A is not conserved: 5 -> 4/],
  ["t + p -> he3 + n + p", /A is not conserved: 4 -> 5/],
  ["t + n -> he3 + n", /Z is not conserved: 1 -> 2/],
  ["t -> t", /a beta decay changes Z by one, here 1 -> 1/],
  ["t + xx -> he4", /unknown nuclide xx/],
  ["t + d", /not an equation/],
  ["-> n", /unknown nuclide/],
  ["t + d -> gamma", /needs reactants and products/],
])("%s is refused", (equation, message) => {
  expect(() => parseEquation(equation)).toThrow(message);
});

describe("names as people write them", () => {
  test.each([
    ["d(p,g)he3", "d-p_gamma-he3"],
    ["d(p,γ)³He", "d-p_gamma-he3"],
    ["2H(p,gamma)3He", "d-p_gamma-he3"],
    ["p(d,g)3He", "d-p_gamma-he3"],
    ["3He(a,g)7Be", "he3-he4_gamma-be7"],
    ["he3(he3,2p)he4", "he3-he3_p-p-he4"],
    ["7Li(d,n)2a", "li7-d_n-he4-he4"],
    ["7Li(d,nα)⁴He", "li7-d_n-he4-he4"],
    ["Be7(t,np)2he4", "be7-t_n-p-he4-he4"],
    ["4He(aa,g)12C", "he4-he4-he4_gamma-c12"],
    ["14N(n,p)14C", "n14-n_p-c14"],
    ["t(β⁻)³He", "t_he3"],
    ["p-d_gamma-he3", "d-p_gamma-he3"],
    ["d + p -> he3", "d-p_gamma-he3"],
    ["n_p", "n_p"],
  ])("%s is %s", (text, id) => {
    expect(parseReactionName(text)).toBe(id);
  });
  test.each([
    ["d-p_gamma-he3", "d(p,γ)³He"],
    ["he3-he3_p-p-he4", "³He(³He,2p)⁴He"],
    ["li7-p_he4-he4", "⁷Li(p,α)⁴He"],
    ["b11-p_he4-he4-he4", "¹¹B(p,2α)⁴He"],
    ["he4-p-n_gamma-li6", "⁴He(pn,γ)⁶Li"],
    ["t_he3", "t(β⁻)³He"],
    ["c11_b11", "¹¹C(β⁺)¹¹B"],
    ["n_p", "n ↔ p"],
  ])("%s is shown as %s", (id, text) => {
    expect(formatReaction(id)).toBe(text);
  });
  test.each([["d(p,g"], ["hello"], ["d(p,q)he3"], ["()"], [""], ["d(,)he3"]])("%s is refused", (text) => {
    expect(() => parseReactionName(text)).toThrow(/not a reaction; write d-p_gamma-he3 or d\(p,g\)he3/);
  });
});

test("an unknown reaction names the nearest one, a reverse one its forward direction", () => {
  expect(() => resolveReaction("d-p_gama-he3", library.reactions)).toThrow(/did you mean d-p_gamma-he3\?/);
  expect(() => resolveReaction("d(p,g)he4", library.reactions, "scale")).toThrow(
    /^scale d\(p,g\)he4: d \+ p -> he4: A is not conserved: 3 -> 4; did you mean/,
  );
  expect(() => resolveReaction("t(p,n)3He", library.reactions)).toThrow(/the reverse of he3-n_p-t, which covers both/);
  expect(() => resolveReaction("7Be(a,p)10B", library.reactions)).toThrow(/the reverse of b10-p_he4-be7/);
  expect(suggestNearest("standrad", ["twelve", "standard"])).toBe("standard");
  expect(suggestNearest("zzz", ["twelve", "standard"])).toBeUndefined();
});

// AME2020 masses; 17.5893 MeV for t(d,n)he4 and 0.782347 MeV for the neutron's decay (row Q-n_->_p_e_nu).
test("Q-values follow from the mass table", () => {
  expect(qValueMeV(makeReaction(["t", "d"], ["he4", "n"]), library.nuclides)).toBeCloseTo(17.5893, 5);
  expect(qValueMeV(makeReaction(["n"], ["p"]), library.nuclides)).toBeCloseTo(0.782347, 6);
});
