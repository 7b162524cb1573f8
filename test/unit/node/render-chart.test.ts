// Figures as files: the three formats, the same bytes every time, and ink where a chart is.
import { createCanvas, loadImage } from "@napi-rs/canvas";
import { describe, expect, test } from "vitest";
import { HISTORY_CHARTS, historyFigure } from "../../../src/charts/history.ts";
import { imageFormat, renderFigure } from "../../../src/node/render-chart.ts";
import { InputError } from "../../../src/numerics/check.ts";
import { sampleHistory } from "../output/sample-answer.ts";

const { table, milestones } = sampleHistory().results;
const figure = (name?: string) => historyFigure(table, "note", milestones, name);

test("the ending chooses the format, whatever its case; others are refused", () => {
  expect(imageFormat("a.b.PNG")).toBe("png");
  expect(() => imageFormat("chart.gif")).toThrow(InputError);
  expect(() => imageFormat("png")).toThrow("must end in .png, .svg or .pdf");
});

describe("each format", () => {
  test("png: two pixels for each px, dark ink inside every panel", async () => {
    const sheet = figure();
    const image = await loadImage(renderFigure(sheet, "a.png"));
    expect([image.width, image.height]).toEqual([2 * sheet.width, 2 * sheet.height]);
    const context = createCanvas(image.width, image.height).getContext("2d");
    context.drawImage(image, 0, 0);
    for (const panel of sheet.panels) {
      const { data } = context.getImageData(2 * panel.x, 2 * panel.y, 2 * panel.width, 2 * panel.height);
      let inked = 0;
      for (let i = 0; i < data.length; i += 4) if (data[i] + data[i + 1] + data[i + 2] < 500) inked += 1;
      expect(inked / (data.length / 4), panel.name).toBeGreaterThan(0.003);
      expect(inked / (data.length / 4), panel.name).toBeLessThan(0.2);
    }
    expect([...context.getImageData(0, 0, 1, 1).data]).toEqual([255, 255, 255, 255]);
  });

  test("svg: a title, and no letter that needs an installed font", () => {
    const svg = renderFigure(figure("weak"), "a.svg").toString("utf8");
    expect(svg).toMatch(/<svg[^>]*><title>Thermal history and nucleosynthesis<\/title>/);
    expect(svg.trimEnd().endsWith("</svg>")).toBe(true);
    expect(svg).not.toContain("<text");
    expect(svg).not.toMatch(/NaN|undefined/);
  });

  test("svg: two figures on one page share no id", () => {
    const ids = (name: string) =>
      [
        ...renderFigure(figure(name), "a.svg")
          .toString("utf8")
          .matchAll(/ id="([^"]+)"/g),
      ].map((match) => match[1]);
    const [weak, abundances] = [ids("weak"), ids("abundances")];
    expect(weak.length).toBeGreaterThan(0);
    expect(weak.filter((id) => abundances.includes(id))).toEqual([]);
  });

  test("pdf: one page with its fonts", () => {
    const pdf = renderFigure(figure("weak"), "a.pdf").toString("latin1");
    expect(pdf.startsWith("%PDF-")).toBe(true);
    expect(pdf.trimEnd().endsWith("%%EOF")).toBe(true);
    expect(pdf.match(/\/Type \/Page\b/g)).toHaveLength(1);
    expect(pdf).toContain("DejaVuSansCondensed");
  });
});

test.each(["a.png", "a.svg", "a.pdf"])("%s: the same bytes every time", (file) => {
  for (const name of HISTORY_CHARTS)
    expect(renderFigure(figure(name), file).equals(renderFigure(figure(name), file)), name).toBe(true);
});
