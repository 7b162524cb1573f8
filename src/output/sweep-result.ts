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

/** Which points of a grid a part holds. */
export interface PartResult {
  readonly k: number;
  readonly n: number;
  /** Numbers of its points, from 1 to `points`, both included. */
  readonly from: number;
  readonly to: number;
  /** Points of the whole grid. */
  readonly points: number;
}

/** Error of the interpolated grid at random points. */
export interface InterpolationCheck {
  /** Number of random points, and the seed of their places. */
  readonly points: number;
  readonly seed: number;
  /** Largest error of each abundance that is not zero. */
  readonly largest: Readonly<Record<string, { readonly absolute: number; readonly relative: number }>>;
}

/** `results` of the command `grid`. */
export interface GridResults extends ScanResults {
  /** The axes as they were asked for. */
  readonly over: readonly string[];
  /** SHA-256 of the rate files behind the grid. */
  readonly ratesDigest: string;
  /** SHA-256 of the table as CSV: header line and rows, without the comments. */
  readonly checksum: string;
  /** Where this is a part. */
  readonly part?: PartResult;
  /** Where the interpolation was checked. */
  readonly check?: InterpolationCheck;
}
