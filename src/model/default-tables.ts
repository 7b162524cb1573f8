/** The default thermal history and weak rates, shipped as generated data so that a first answer need not compute them. */
import {
  assembleHistory,
  BACKGROUND_DEFAULTS,
  HISTORY_COLUMNS,
  type HistoryColumns,
  outputGrid,
  START_MEV,
  type ThermalHistory,
} from "../background/history.ts";
import * as codata from "../constants/codata.ts";
import * as particle from "../constants/particle.ts";
import { notAKnotSlopes } from "../numerics/interpolate.ts";
import { WEAK_DEFAULTS } from "../weak/inputs.ts";
import { WEAK_TABLE_SPACING, type WeakTable } from "../weak/table.ts";
import { DEFAULT_TABLES } from "./default-tables.generated.ts";

/** What the stored numbers depend on: every constant, the defaults and the grids. A change makes them unused. */
export function defaultTablesFingerprint(): string {
  const grid = outputGrid(START_MEV.threeTemperatures);
  const constants = Object.entries({ ...codata, ...particle }).sort(([a], [b]) => (a < b ? -1 : 1));
  const text = JSON.stringify([constants, BACKGROUND_DEFAULTS, WEAK_DEFAULTS, WEAK_TABLE_SPACING, grid.length]);
  // FNV-1a, 32 bits (Fowler, Noll & Vo), twice with different offsets.
  const hash = (offset: number) => {
    let h = offset;
    for (let i = 0; i < text.length; i++) h = Math.imul(h ^ text.charCodeAt(i), 16777619);
    return (h >>> 0).toString(16).padStart(8, "0");
  };
  return hash(2166136261) + hash(84696351);
}

/** Numbers as text: base64 of little-endian 64-bit floats. */
export function encodeNumbers(numbers: Float64Array): string {
  const bytes = new Uint8Array(8 * numbers.length);
  const view = new DataView(bytes.buffer);
  numbers.forEach((x, i) => {
    view.setFloat64(8 * i, x, true);
  });
  let binary = "";
  for (const byte of bytes) binary += String.fromCharCode(byte);
  return btoa(binary);
}

/** Inverse of {@link encodeNumbers}. */
export function decodeNumbers(text: string): Float64Array {
  const binary = atob(text);
  const bytes = new Uint8Array(binary.length);
  for (let i = 0; i < binary.length; i++) bytes[i] = binary.charCodeAt(i);
  const view = new DataView(bytes.buffer);
  return Float64Array.from({ length: bytes.length / 8 }, (_, i) => view.getFloat64(8 * i, true));
}

let usable: boolean | undefined;

/** False if the constants or grids have changed since the tables were generated. */
export function defaultTablesHold(): boolean {
  usable ??= DEFAULT_TABLES.fingerprint === defaultTablesFingerprint();
  return usable;
}

/** The stored default history; undefined if it no longer holds. */
export function storedHistory(): ThermalHistory | undefined {
  if (!defaultTablesHold()) return undefined;
  const columns = Object.fromEntries(
    HISTORY_COLUMNS.map((name) => [name, decodeNumbers(DEFAULT_TABLES.history[name])]),
  ) as HistoryColumns;
  return assembleHistory(outputGrid(START_MEV.threeTemperatures), columns, DEFAULT_TABLES.counts);
}

/** The stored default weak table; undefined if it no longer holds. */
export function storedWeakTable(): WeakTable | undefined {
  if (!defaultTablesHold()) return undefined;
  const s = decodeNumbers(DEFAULT_TABLES.weak.s);
  const lnNToP = decodeNumbers(DEFAULT_TABLES.weak.lnNToP);
  const lnPToN = decodeNumbers(DEFAULT_TABLES.weak.lnPToN);
  return { s, lnNToP, lnPToN, lnNToPSlope: notAKnotSlopes(s, lnNToP), lnPToNSlope: notAKnotSlopes(s, lnPToN) };
}
