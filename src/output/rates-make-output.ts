/** What the table of `rates make` holds besides the rate file itself. */

/** What the columns of the table are. */
export function ratesMakeDescriptions(): Record<string, string> {
  return {
    T9: "temperature",
    rate: "N_A<sigma v> by the Gamow integral, without 1/(1 + delta)",
    f_u: "rate with S + sigma over rate with S; 1 if the table has no errors",
    outside: "share of the rate from energies outside the table, where S is held constant",
    interpolation: "relative difference between a spline of S and one of ln S",
  };
}
