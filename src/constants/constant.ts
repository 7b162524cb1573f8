/** A physical constant with everything needed to defend it: value, standard uncertainty, unit, source. */
export interface Constant {
  readonly value: number;
  /** One standard deviation in the same unit; 0 where exact by definition. */
  readonly uncertainty: number;
  readonly unit: string;
  readonly source: string;
}
