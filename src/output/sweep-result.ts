/** `results` of the commands `scan` and `grid`. */
import type { Table } from "../numerics/table.ts";

/** One axis of a scan or grid. */
export interface AxisResult {
  /** Key of the parameter, or `scale:R`; name of its column. */
  readonly key: string;
  /** Unit in astropy notation; "1" for a pure number. */
  readonly unit: string;
  readonly count: number;
  /** Whether the values are evenly spread in the logarithm. */
  readonly log: boolean;
}

/** `results` of the command `scan`. */
export interface ScanResults {
  /** In the order of the columns; the first one varies slowest. */
  readonly axes: readonly AxisResult[];
  /** Columns: the axes, each abundance, its error beside it as NAME_sigma. */
  readonly table: Table;
}
