/** Provenance of the rate files that make-rates.ts writes: citation, origin, basis and remarks of every source. */
import type { RateFileContent } from "../nuclear/write-rate-file.ts";

export type Provenance = Pick<RateFileContent, "citation" | "doi" | "origin" | "basis" | "uncertaintyBasis" | "note">;

export const REACLIB = "JINA REACLIB (Cyburt et al. 2010, ApJS 189, 240)";
/** Kept in every output until a published uncertainty replaces the number. */
export const ASSUMED = "ASSUMED uncertainty; the factor is a placeholder of this project and stands in no source";

const DESCOUVEMONT = {
  citation: "Descouvemont, Adahchour, Angulo, Coc, Vangioni-Flam 2004, At. Data Nucl. Data Tables 88, 203",
  doi: "10.1016/j.adt.2004.08.001",
} as const;
const CAUGHLAN = {
  citation: "Caughlan & Fowler 1988, At. Data Nucl. Data Tables 40, 283",
  doi: "10.1016/0092-640X(88)90009-5",
} as const;
const ILIADIS_2016 = {
  citation: "Iliadis, Anderson, Coc, Timmes, Starrfield 2016, ApJ 831, 107",
  doi: "10.3847/0004-637x/831/1/107",
} as const;
const GOMEZ_INESTA = {
  citation: "Gomez Inesta, Iliadis, Coc 2017, ApJ 849, 134",
  doi: "10.3847/1538-4357/aa9025",
} as const;

/** Tables made by evaluating a fit of the compilation on the 60-point grid; all carry an assumed uncertainty. */
function gridded(
  label: string,
  source: { citation: string; doi?: string },
  basis: Provenance["basis"],
  remark = "",
): Provenance {
  return {
    ...source,
    origin: `seven-parameter fit labelled ${label} of ${REACLIB}, evaluated on the temperature grid; the fit may stray 1 to 2 per cent from the numbers of the paper`,
    basis,
    uncertaintyBasis: "assumed",
    note: remark === "" ? ASSUMED : `${ASSUMED}; ${remark}`,
  };
}

const REDISTRIBUTED = (with_: string) =>
  `printed table (adopted, lower and upper rate) as redistributed with the data of ${with_}; f_u = sqrt(upper/lower)`;

/** Evaluated tables of the source folder: file name without ending -> evaluation name and provenance. */
export const EVALUATED: Readonly<Record<string, Provenance & { readonly evaluation: string }>> = {
  "p-n-gamma-d": {
    evaluation: "ando2006",
    citation: "Ando, Cyburt, Hong, Hyun 2006, Phys. Rev. C 74, 025809",
    doi: "10.1103/PhysRevC.74.025809",
    origin:
      "rational function of T9 given in the paper, tabulated; its coefficients are from memory, checked against the REACLIB fit an06 to the same paper (0.08 per cent for T9 = 0.01 to 5)",
    basis: "theory",
    uncertaintyBasis: "published",
    note: "1 per cent as the abstract states; about 0.4 per cent is used elsewhere (from memory)",
  },
  "d-d-n-he3": {
    evaluation: "gomezinesta2017",
    ...GOMEZ_INESTA,
    origin:
      "theoretical S(E) of Arai et al. 2011 (PRL 107, 132502), linear between its nodes, integrated from 0 to 10 MeV and multiplied by the Bayesian scale factor 0.9608 +- 0.0105 of the authors; agrees with their rate table to 0.05 per cent",
    basis: "evaluation",
    uncertaintyBasis: "published",
  },
  "d-d-p-t": {
    evaluation: "gomezinesta2017",
    ...GOMEZ_INESTA,
    origin:
      "theoretical S(E) of Arai et al. 2011 (PRL 107, 132502), linear between its nodes, integrated from 0 to 10 MeV and multiplied by the scale factor 0.9547 +- 0.0098 that the authors' rate table implies; agrees with that table to 0.02 per cent",
    basis: "evaluation",
    uncertaintyBasis: "published",
    note: "the posterior samples of the authors average 0.9572 +- 0.0098, 0.25 per cent above their table",
  },
  "d-p-gamma-he3": {
    evaluation: "iliadis2016",
    ...ILIADIS_2016,
    origin:
      "theoretical S(E) of Marcucci et al. 2005 (PRC 72, 014001, citation from memory) integrated and multiplied by the factor 0.9907 that the authors' rate table implies; S(E) continued linearly above 2 MeV, which matters above T9 = 4; agrees with their table to 0.02 per cent up to T9 = 3",
    basis: "evaluation",
    uncertaintyBasis: "published",
    note: "older than the measurement of LUNA in 2020 (see mossa2020), which lies 2 to 3 per cent lower around T9 = 0.8",
  },
  "d-p-gamma-he3.luna2020": {
    evaluation: "mossa2020",
    citation: "Mossa et al. (LUNA) 2020, Nature 587, 210",
    doi: "10.1038/s41586-020-2878-4",
    origin:
      "S(E)/(eV b) = 0.2121 + 5.975e-3 E + 5.463e-6 E^2 - 1.665e-9 E^3 with E in keV (c.m.), held constant above 2 MeV, integrated; the coefficients are from memory and not verified against the paper",
    basis: "experiment",
    uncertaintyBasis: "published",
    note: "3 per cent as stated for the measurement; Moscoso et al. 2021 (ApJ 923, 49) give 2.2 per cent at T9 = 0.8",
  },
  "d-p-gamma-he3.theory2016": {
    evaluation: "marcucci2016",
    citation: "Marcucci, Mangano, Kievsky, Viviani 2016, Phys. Rev. Lett. 116, 102501",
    doi: "10.1103/PhysRevLett.116.102501",
    origin:
      "theoretical S(E) at 19 energies from 10 to 2000 keV, shape-preserving interpolation, S(0) = 0.219 eV b from memory, constant above 2 MeV, integrated",
    basis: "theory",
    uncertaintyBasis: "from memory",
    note: "several per cent above the direct measurements; for comparison",
  },
  "he3-a-gamma-be7": {
    evaluation: "iliadis2016",
    ...ILIADIS_2016,
    origin:
      "theoretical S(E) of Neff 2011 (PRL 106, 042502) to 3 MeV integrated and multiplied by the Bayesian scale factor 0.9647, i.e. S(0) = 0.572 keV b; above T9 = 2 the shape of the fit of Cyburt & Davids 2008 (PRC 78, 064614) joined at T9 = 2; agrees with the authors' table to 0.06 per cent up to T9 = 1",
    basis: "evaluation",
    uncertaintyBasis: "published",
    note: "f_u = 1.024 is that of the authors; 1.05 above T9 = 2 is a guess. Their own table stops its integral at 1.7 MeV and is 0.7 per cent low at T9 = 2 and 7 per cent at T9 = 3",
  },
  "he3-d-p-he4": {
    evaluation: "desouza2019",
    citation: "de Souza, Iliadis, Coc 2019, ApJ 872, 75",
    origin:
      "numerical table (mean and factor uncertainty) released by the authors up to T9 = 1; above it the shape of the REACLIB fit de04 (Descouvemont et al. 2004) joined at T9 = 1",
    basis: "evaluation",
    uncertaintyBasis: "published",
    note: "above T9 = 1 f_u = 1.05 is a guess (the one-level fit of the authors is 11 per cent lower at T9 = 3). A second file of the authors, desouza2019-case2, differs by 1 to 2 per cent at T9 = 0.1 to 1; which one was printed is not known, so about 1.02 is a realistic factor",
  },
  "he3-d-p-he4.caseII": {
    evaluation: "desouza2019-case2",
    citation: "de Souza, Iliadis, Coc 2019, ApJ 872, 75",
    origin: "second numerical table (mean and factor uncertainty) of the authors, made with other channel radii",
    basis: "evaluation",
    uncertaintyBasis: "published",
  },
  "he3-d-p-he4.descouvemont2004": {
    evaluation: "descouvemont2004",
    ...DESCOUVEMONT,
    origin: REDISTRIBUTED("de Souza et al. 2019"),
    basis: "evaluation",
    uncertaintyBasis: "published",
  },
  "t-d-n-he4": {
    evaluation: "desouza2019",
    citation: "de Souza, Boston, Coc, Iliadis 2019, Phys. Rev. C 99, 014619",
    doi: "10.1103/PhysRevC.99.014619",
    origin: "numerical table (median, factor uncertainty) released by the authors",
    basis: "evaluation",
    uncertaintyBasis: "published",
  },
  "t-d-n-he4.descouvemont2004": {
    evaluation: "descouvemont2004",
    ...DESCOUVEMONT,
    origin: REDISTRIBUTED("de Souza et al. 2019"),
    basis: "evaluation",
    uncertaintyBasis: "published",
    note: "one grid point that the printed table lacks is interpolated",
  },
  "be7-n-p-li7": {
    evaluation: "desouza2020",
    citation: "de Souza, Kiang, Coc, Iliadis 2020, ApJ 894, 134",
    origin:
      "numerical table (median of the posterior rate samples, R-matrix fit with seven levels) released by the authors in October 2019, before publication; the printed table may differ a little",
    basis: "evaluation",
    uncertaintyBasis: "published",
  },
  "be7-n-p-li7.damone2018": {
    evaluation: "damone2018",
    citation: "Damone et al. (n_TOF) 2018, Phys. Rev. Lett. 121, 042701",
    doi: "10.1103/PhysRevLett.121.042701",
    origin: "numerical table as redistributed with the data of de Souza et al. 2020",
    basis: "experiment",
    uncertaintyBasis: "published",
  },
  "be7-n-p-li7.descouvemont2004": {
    evaluation: "descouvemont2004",
    ...DESCOUVEMONT,
    origin: REDISTRIBUTED("de Souza et al. 2020"),
    basis: "evaluation",
    uncertaintyBasis: "published",
  },
  "he3-n-p-t": { evaluation: "descouvemont2004", ...gridded("de04", DESCOUVEMONT, "evaluation") },
  "t-a-gamma-li7": { evaluation: "descouvemont2004", ...gridded("de04", DESCOUVEMONT, "evaluation") },
  "li7-p-a-he4": { evaluation: "descouvemont2004", ...gridded("de04", DESCOUVEMONT, "evaluation") },
  "d-n-gamma-t": {
    evaluation: "nagai2006",
    ...gridded(
      "nk06",
      { citation: "Nagai et al. 2006, Phys. Rev. C 74, 025804", doi: "10.1103/PhysRevC.74.025804" },
      "experiment",
    ),
  },
  "d-a-gamma-li6": {
    evaluation: "tursunov2020",
    ...gridded(
      "tu19",
      { citation: "Tursunov et al. 2020, Nucl. Phys. A 1000, 121884", doi: "10.1016/j.nuclphysa.2020.121884" },
      "theory",
    ),
  },
  "li6-p-a-he3": {
    evaluation: "pizzone2005",
    ...gridded("pt05", { citation: "Pizzone et al. 2005, A&A 438, 779" }, "experiment"),
  },
  "be7-n-a-he4": {
    evaluation: "wagoner1969",
    ...gridded(
      "wag",
      { citation: "Wagoner 1969, ApJS 18, 247", doi: "10.1086/190191" },
      "estimate",
      "the source itself is an order-of-magnitude estimate without data",
    ),
  },
  "be7-d-p-2he4": { evaluation: "caughlan1988", ...gridded("cf88", CAUGHLAN, "evaluation") },
  "li7-d-n-2he4": { evaluation: "caughlan1988", ...gridded("cf88", CAUGHLAN, "evaluation") },
  "li8-a-n-b11": {
    evaluation: "lacognata2011",
    ...gridded(
      "ld11",
      { citation: "La Cognata & Del Zoppo 2011, ApJ 736, 148", doi: "10.1088/0004-637X/736/2/148" },
      "evaluation",
      "the fit underflows below the first row, where the rate counts as zero",
    ),
  },
  "li7-n-gamma-li8": {
    evaluation: "kadonis2009",
    ...gridded(
      "ks03",
      { citation: "KADoNiS v0.3 (2009), refitted by REACLIB in 2017" },
      "evaluation",
      "the fit fails below T9 = 0.01",
    ),
  },
  "be7-p-gamma-b8": {
    evaluation: "angulo1999",
    ...gridded(
      "nacr",
      { citation: "Angulo et al. (NACRE) 1999, Nucl. Phys. A 656, 3", doi: "10.1016/S0375-9474(99)00030-5" },
      "evaluation",
    ),
  },
};
