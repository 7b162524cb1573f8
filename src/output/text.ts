/** Pieces of the text output: numbers with errors, aligned columns, paragraphs that fit the terminal. */

/** Width that every text output fits in. */
export const TEXT_WIDTH = 80;

/** Columns a string takes in a terminal: combining marks take none. */
export function displayWidth(text: string): number {
  let width = 0;
  for (const character of text) if (!/\p{Mark}/u.test(character)) width += 1;
  return width;
}

/** The text filled up with blanks to a width, on the right or (`right` set) on the left. */
export function pad(text: string, width: number, right = false): string {
  const blanks = " ".repeat(Math.max(0, width - displayWidth(text)));
  return right ? blanks + text : text + blanks;
}

function powerOfTen(value: number): number {
  if (value === 0) return 0;
  return Number(value.toExponential().split("e")[1]);
}

/**
 * A number in figures: plain between 1e-3 and 1e5, otherwise as 2.456e-5.
 * @param digits significant digits, 1 to 17
 */
export function formatNumber(value: number, digits = 5): string {
  if (value === 0) return "0";
  const power = powerOfTen(Number(value.toExponential(digits - 1)));
  if (power >= -3 && power < 5) return value.toFixed(Math.max(0, digits - 1 - power));
  return value.toExponential(digits - 1).replace("e+", "e");
}

/**
 * A value with its error, the error to two digits and the value to the same place: `0.24690 ± 0.00013`,
 * `2.456e-5 ± 0.030e-5`. Without an error the value alone, to five digits.
 */
export function formatEstimate(value: number, sigma?: number): string {
  if (sigma === undefined || !(sigma > 0)) return formatNumber(value);
  const errorPower = powerOfTen(Number(sigma.toExponential(1)));
  const power = Math.max(powerOfTen(value), errorPower);
  const plain = power >= -3 && power < 5;
  const shift = plain ? 0 : power;
  const decimals = Math.max(0, shift - errorPower + 1);
  const figure = (x: number) => (x / 10 ** shift).toFixed(decimals) + (shift === 0 ? "" : `e${shift}`);
  return `${figure(value)} ± ${figure(sigma)}`;
}

/** A value with the error of its last digits in brackets, for narrow tables: `2.525(37)e-5`, `0.24684(11)`. */
export function formatConcise(value: number, sigma: number): string {
  const [figure, error] = formatEstimate(value, sigma).split(" ± ");
  if (error === undefined) return figure;
  const exponent = /e.*$/.exec(figure)?.[0] ?? "";
  const digits = error
    .replace(/e.*$/, "")
    .replace(".", "")
    .replace(/^0+(?=\d)/, "");
  return `${figure.slice(0, figure.length - exponent.length)}(${digits})${exponent}`;
}

/** `1 file`, `3 files`. */
export function counted(count: number, what: string): string {
  return `${count} ${what}${count === 1 ? "" : "s"}`;
}

/**
 * Rows of cells as lines, each column as wide as its widest cell, two blanks between.
 * @param right columns that are set flush right, by number
 */
export function alignColumns(rows: readonly (readonly string[])[], right: readonly number[] = []): string[] {
  const widths: number[] = [];
  for (const row of rows)
    row.forEach((cell, i) => {
      widths[i] = Math.max(widths[i] ?? 0, displayWidth(cell));
    });
  return rows.map((row) =>
    row
      .map((cell, i) => pad(cell, widths[i], right.includes(i)))
      .join("  ")
      .trimEnd(),
  );
}

/**
 * A paragraph broken between words to fit a width; a longer word stands alone on its line. A no-break space holds.
 * @param first  what the first line starts with
 * @param indent what every further line starts with
 */
export function wrap(text: string, first = "", indent = first, width = TEXT_WIDTH): string[] {
  const lines: string[] = [];
  let line = first;
  let empty = true;
  for (const word of text.split(/[ \n]+/).filter((w) => w !== "")) {
    if (!empty && displayWidth(line) + 1 + displayWidth(word) > width) {
      lines.push(line);
      line = indent;
      empty = true;
    }
    line += empty ? word : ` ${word}`;
    empty = false;
  }
  lines.push(line.trimEnd());
  return lines.map((each) => each.replaceAll("\u00a0", " "));
}
