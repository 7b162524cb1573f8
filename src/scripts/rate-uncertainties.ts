/** Further evaluations that repeat the rate of a file of ours with an uncertainty found elsewhere. */
import type { RateFileContent } from "../nuclear/write-rate-file.ts";

/** An uncertainty for a rate that stands: the rate's digits are copied, the factor is this one at all temperatures. */
export interface FurtherUncertainty {
  /** Evaluated table of the source folder whose rate is repeated; `reaclib ID` for a set of the compilation. */
  readonly from: string;
  readonly evaluation: string;
  readonly factorUncertainty: string;
  readonly uncertaintyBasis: RateFileContent["uncertaintyBasis"];
  readonly note: string;
  /** Where the set of a compilation has a paper of its own. */
  readonly citation?: string;
  readonly doi?: string;
}

const UNREAD = "the value is from memory and was not read back; used at all temperatures";

export const FURTHER_UNCERTAINTIES: readonly FurtherUncertainty[] = [
  {
    from: "t-a-gamma-li7",
    evaluation: "descouvemont2004-s0",
    factorUncertainty: "1.053",
    uncertaintyBasis: "from memory",
    note: `rate of descouvemont2004 unchanged; f_u from the error of that paper's S(0) = 0.095 +- 0.005 keV b; ${UNREAD}`,
  },
  {
    from: "li7-p-a-he4",
    evaluation: "descouvemont2004-s0",
    factorUncertainty: "1.060",
    uncertaintyBasis: "from memory",
    note: `rate of descouvemont2004 unchanged; f_u from the error of that paper's S(0) = 67 +- 4 keV b; ${UNREAD}`,
  },
  {
    from: "li6-p-a-he3",
    evaluation: "pizzone2005-s0",
    factorUncertainty: "1.063",
    uncertaintyBasis: "from memory",
    note: `rate of pizzone2005 unchanged; f_u from the error of S(0) = 3.00 +- 0.19 MeV b (Tumino et al. 2004, Prog. Theor. Phys. Suppl. 154, 341) that the paper uses; ${UNREAD}`,
  },
  {
    from: "be7-p-gamma-b8",
    evaluation: "angulo1999-s0",
    factorUncertainty: "1.095",
    uncertaintyBasis: "from memory",
    note: `rate of angulo1999 unchanged; f_u from the error of that compilation's S(0) = 21 +- 2 eV b; ${UNREAD}`,
  },
  {
    from: "d-p-gamma-he3.luna2020",
    evaluation: "mossa2020-moscoso2021",
    factorUncertainty: "1.022",
    uncertaintyBasis: "published",
    note: "rate of mossa2020 unchanged; f_u = 1.022 as Moscoso, de Souza, Coc, Iliadis 2021 (ApJ 923, 49, doi 10.3847/1538-4357/ac1db0) give for T9 = 0.8 from all data together, used at all temperatures; their own rate differs a little from this one",
  },
  {
    from: "reaclib he3-he4_gamma-be7",
    evaluation: "cyburt2008",
    factorUncertainty: "1.074",
    uncertaintyBasis: "published",
    citation:
      "Cyburt & Davids 2008, Phys. Rev. C 78, 064614; as a fit in JINA REACLIB (Cyburt et al. 2010, ApJS 189, 240)",
    doi: "10.1103/PhysRevC.78.064614",
    note: "f_u = 1.074 as Cyburt, Fields, Olive 2008 (JCAP 11, 012) give; it agrees with the paper's S(0) = 0.580 +- 0.043 keV b; used at all temperatures",
  },
];
