// Axes: values, units, and every way to write one wrongly.
import { describe, expect, test } from "vitest";
import { InputError } from "../../../src/numerics/check.ts";
import { parseAxis } from "../../../src/sweep/axis.ts";

const reactionId = (name: string): string => {
  if (name !== "d(p,g)he3" && name !== "d-p_gamma-he3") throw new InputError("reaction", `unknown reaction ${name}`);
  return "d-p_gamma-he3";
};
const parse = (text: string) => parseAxis(text, reactionId);

test("a linear axis is evenly spread with exact ends and short decimals", () => {
  expect(parse("omegaB=0.02:0.024:5")).toEqual({
    key: "omegaB",
    values: [0.02, 0.021, 0.022, 0.023, 0.024],
    log: false,
    unit: "1",
  });
  expect(parse("tauN=890:870:3").values).toEqual([890, 880, 870]);
  expect(parse("tauN=870,880").unit).toBe("s");
});

test("a log axis is evenly spread in the logarithm with exact ends", () => {
  const { values, log } = parse("eta10=1:100:5log");
  expect(log).toBe(true);
  expect(values[0]).toBe(1);
  expect(values[4]).toBe(100);
  values.slice(1).forEach((value, i) => {
    expect(value / values[i]).toBeCloseTo(Math.sqrt(10), 12);
  });
});

test("a list keeps its values and order", () => {
  expect(parse("nEff=3,2.5, 4").values).toEqual([3, 2.5, 4]);
  expect(parse("xiE=-0.1,0,0.1").values).toEqual([-0.1, 0, 0.1]);
});

test("a rate's scale is named by the reaction's id, whatever the notation", () => {
  const axis = parse("scale:d(p,g)he3=0.9:1.1:3");
  expect(axis.key).toBe("scale:d-p_gamma-he3");
  expect(axis.reaction).toBe("d-p_gamma-he3");
  expect(parse("scale:n_p=0.99,1.01").reaction).toBe("n_p");
});

describe("refused, with the axis and the reason", () => {
  test.each([
    ["", /write KEY=/],
    ["eta10", /write KEY=/],
    ["eta10=", /write KEY=/],
    ["=1:2:3", /write KEY=/],
    ["eta10=1:2", /write KEY=/],
    ["eta10=1:2:3:4", /write KEY=/],
    ["eta10=10:1:0", /count 0: must be a whole number of 2 or more/],
    ["eta10=1:10:1", /count 1: must be/],
    ["eta10=1:10:2.5", /count 2.5: must be/],
    ["eta10=1:10:-3", /count -3: must be/],
    ["eta10=1:10:lots", /count lots: not a number/],
    ["eta10=1:10:1e9", /does not fit into memory/],
    ["eta10=0:1:3log", /needs start and stop above 0, not 0/],
    ["xiE=-1:1:3log", /needs start and stop above 0, not -1/],
    ["eta10=a,b", /value a: not a number/],
    ["eta10=1,,2", /value "": not a number/],
    ["eta10=1:b:3", /stop b: not a number/],
    ["eta10=nan:2:3", /start nan: not a number/],
    ["eta10=5:5:3", /start and stop are both 5/],
    ["eta10=1,2,1", /1 stands there twice/],
    ["eta10=1:1000:5log", /1000 is out of range; accepted are 0.0274 to 109.5/],
    ["tauN=100:900:5", /100 is out of range; accepted are 500 to 1500 s/],
    ["nosuch=1:2:3", /unknown key nosuch; accepted are omegaB, eta10/],
    ["scale:nosuch=1:2:3", /unknown reaction nosuch/],
    ["scale:n_p=0:2:3", /0 is out of range/],
    ["samples=10.5,20", /whole numbers only/],
  ])("%s", (text, message) => {
    expect(() => parse(text)).toThrow(InputError);
    expect(() => parse(text)).toThrow(message);
  });
});
