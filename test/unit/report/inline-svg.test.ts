// Charts in the page: paths shorter but not moved, ids of their own, a name and a description.
import { expect, test } from "vitest";
import { seededUniform } from "../../../src/numerics/random.ts";
import { inlineSvg, shortPath } from "../../../src/report/inline-svg.ts";

/** Ends of the segments of a path with the commands M L H V C Q Z, absolute or relative. */
function ends(path: string): [number, number][] {
  const words = path.match(/[A-Za-z]|-?(?:\d+\.?\d*|\.\d+)/g) ?? [];
  const counts: Record<string, number> = { m: 2, l: 2, h: 1, v: 1, c: 6, q: 4, z: 0 };
  const found: [number, number][] = [];
  let [x, y, sx, sy] = [0, 0, 0, 0];
  let command = "";
  for (let i = 0; i < words.length; ) {
    if (/[A-Za-z]/.test(words[i])) command = words[i++];
    const kind = command.toLowerCase();
    const relative = command === kind;
    const values = words.slice(i, i + counts[kind]).map(Number);
    i += counts[kind];
    if (kind === "z") [x, y] = [sx, sy];
    else if (kind === "h") x = values[0] + (relative ? x : 0);
    else if (kind === "v") y = values[0] + (relative ? y : 0);
    else {
      const [dx, dy] = values.slice(-2);
      [x, y] = relative ? [x + dx, y + dy] : [dx, dy];
    }
    if (kind === "m") [sx, sy] = [x, y];
    found.push([x, y]);
  }
  return found;
}

test("a shortened path has its corners where they were, to a hundredth of a pixel, however long it is", () => {
  const seed = 20260105;
  const random = seededUniform(seed);
  const at = () => (1200 * random()).toFixed(5);
  for (let trial = 0; trial < 50; trial++) {
    let path = `M${at()} ${at()}`;
    for (let i = 0; i < 300; i++) {
      const kind = "LHVCQZM"[Math.floor(7 * random())];
      const count = { L: 2, H: 1, V: 1, C: 6, Q: 4, Z: 0, M: 2 }[kind] as number;
      path += kind + Array.from({ length: count }, at).join(" ");
      if (kind === "Z") path += `M${at()} ${at()}`;
    }
    const before = ends(path);
    const after = ends(shortPath(path));
    expect(after.length).toBe(before.length);
    before.forEach(([x, y], i) => {
      expect(Math.abs(after[i][0] - x), `seed ${seed}, trial ${trial}, corner ${i}`).toBeLessThan(0.0051);
      expect(Math.abs(after[i][1] - y)).toBeLessThan(0.0051);
    });
  }
});

test("it is short", () => {
  expect(shortPath("M72.5 40L72.5 448")).toBe("m72.5 40l0 408");
  expect(shortPath("M0.251 0.5L0.751 0.25Z")).toBe("m.25.5l.5-.25z".replace(".25.5", ".25 .5"));
  expect(shortPath("M1 1A5 5 0 0 1 2 2")).toBe("M1 1A5 5 0 0 1 2 2");
});

test("a chart gets a name, a description and ids that no other chart has", () => {
  const svg =
    '<?xml version="1.0"?>\n<svg xmlns="http://www.w3.org/2000/svg" width="40" height="30" viewBox="0 0 40 30"><title>old</title>' +
    '<clipPath id="a"><path d="M0 0L40 30"/></clipPath>\n\t<g clip-path="url(#a)"><path stroke-width="1" d="M0 0L1 1"/></g></svg>\n';
  const { html } = inlineSvg({ svg, title: "A <chart>", description: "what it shows" }, "one");
  expect(html).toMatch(/^<svg [^>]*role="img" aria-labelledby="one-name" aria-describedby="one-text">/);
  expect(html).toContain('<title id="one-name">A &lt;chart&gt;</title><desc id="one-text">what it shows</desc>');
  expect(html).toContain('<clipPath id="one-a">');
  expect(html).toContain('clip-path="url(#one-a)"');
  expect(html).not.toContain("old");
  expect(html).not.toContain("<?xml");
  expect(() => inlineSvg({ svg: "<p>no chart</p>", title: "", description: "" }, "x")).toThrow(/not an svg/);
});
