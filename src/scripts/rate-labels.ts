/** Papers behind the labels of the compilation's sets, and the provenance of files made of such sets. */
import { ASSUMED, type Provenance, REACLIB } from "./rate-sources.ts";

interface Label {
  readonly citation: string;
  readonly doi?: string;
  readonly basis: Provenance["basis"];
}

/** Labels of the compilation's sets -> the paper behind them, as its label list documents it unless marked. */
export const LABELS: Readonly<Record<string, Label>> = {
  De99: {
    citation: "Descouvemont 1999, Nucl. Phys. A 646, 261",
    doi: "10.1016/S0375-9474(98)00629-0",
    basis: "theory",
  },
  ac12: { citation: "Arnold et al. 2012, Phys. Rev. C 85 (4)", doi: "10.1103/PhysRevC.85.044605", basis: "experiment" },
  an06: { citation: "Ando et al. 2006, Phys. Rev. C 74, 025809", doi: "10.1103/PhysRevC.74.025809", basis: "theory" },
  bb92: { citation: "Rauscher et al. 1994, ApJ 429, 499", doi: "10.1086/174339", basis: "theory" },
  bk91: { citation: "Brune et al. 1991, Phys. Rev. C 43, 875", doi: "10.1103/PhysRevC.43.875", basis: "experiment" },
  bk92: { citation: "Brune et al. 1992, Phys. Rev. C 45, 1382", doi: "10.1103/PhysRevC.45.1382", basis: "experiment" },
  br16: {
    citation: "Bruno et al. (LUNA) 2016, Phys. Rev. Lett. 117, 142502 (citation from memory)",
    basis: "experiment",
  },
  cd08: {
    citation: "Cyburt & Davids 2008, Phys. Rev. C 78, 064614",
    doi: "10.1103/PhysRevC.78.064614",
    basis: "evaluation",
  },
  cf88: {
    citation: "Caughlan & Fowler 1988, At. Data Nucl. Data Tables 40, 283",
    doi: "10.1016/0092-640X(88)90009-5",
    basis: "evaluation",
  },
  db18: {
    citation: "Damone et al. 2018, Phys. Rev. Lett. 121, 042701",
    doi: "10.1103/PhysRevLett.121.042701",
    basis: "experiment",
  },
  de04: {
    citation: "Descouvemont et al. 2004, At. Data Nucl. Data Tables 88, 203",
    doi: "10.1016/j.adt.2004.08.001",
    basis: "evaluation",
  },
  fkth: { citation: "Thielemann 1987, statistical-model rates", basis: "theory" },
  fy05: { citation: "Fynbo et al. 2005, Nature 433, 136", doi: "10.1038/nature03219", basis: "experiment" },
  gi17: { citation: "Gomez Inesta, Iliadis, Coc 2017, ApJ 849, 134", doi: "10.3847/1538-4357/aa9025", basis: "fit" },
  gl07: { citation: "Guo et al. 2007, J. Phys. G 34", doi: "10.1088/0954-3899/34/1/006", basis: "experiment" },
  gl12: { citation: "Guo et al. 2012, ApJ 756, 193", doi: "10.1088/0004-637X/756/2/193", basis: "experiment" },
  go17: { citation: "Gomez Inesta, Iliadis, Coc 2017, ApJ 849, 134", doi: "10.3847/1538-4357/aa9025", basis: "fit" },
  hi09: {
    citation: "Hashimoto et al. 2009, Phys. Lett. B 674, 276",
    doi: "10.1016/j.physletb.2009.03.031",
    basis: "experiment",
  },
  hu14: { citation: "Hu et al. 2014, Phys. Rev. C 90, 025803 (citation from memory)", basis: "experiment" },
  ia08: {
    citation: "Iliadis et al. 2008, Phys. Rev. C 77, 045802",
    doi: "10.1103/PhysRevC.77.045802",
    basis: "evaluation",
  },
  il10: {
    citation: "Iliadis et al. 2010, Nucl. Phys. A 841, 1, 31, 251, 323",
    doi: "10.1016/j.nuclphysa.2010.04.012",
    basis: "evaluation",
  },
  il16: { citation: "Iliadis et al. 2016, ApJ 831, 107", doi: "10.3847/0004-637x/831/1/107", basis: "fit" },
  im05: { citation: "Imbriani et al. 2005, Eur. Phys. J. A 25", basis: "experiment" },
  jo09: { citation: "Johnson et al. 2009, Phys. Rev. C 80, 045805 (citation from memory)", basis: "experiment" },
  jz10: {
    citation: "Su et al. 2010, Chin. Phys. Lett. 27, 052101",
    doi: "10.1088/0256-307X/27/5/052101",
    basis: "experiment",
  },
  ka02: {
    citation: "Dillmann et al. (KADoNiS v0.2) 2006, AIP Conf. Proc. 819, 123",
    doi: "10.1063/1.2187846",
    basis: "evaluation",
  },
  kg91: {
    citation: "Koehler & Graff 1991, Phys. Rev. C 44, 2788",
    doi: "10.1103/PhysRevC.44.2788",
    basis: "experiment",
  },
  ks03: { citation: "KADoNiS v0.3 (2009), refitted by REACLIB in 2017", basis: "evaluation" },
  ld11: {
    citation: "La Cognata & Del Zoppo 2011, ApJ 736, 148",
    doi: "10.1088/0004-637X/736/2/148",
    basis: "evaluation",
  },
  lg06: { citation: "Li et al. 2006, Phys. Rev. C 74, 035801", doi: "10.1103/PhysRevC.74.035801", basis: "experiment" },
  li10: {
    citation: "LeBlanc et al. 2010, Phys. Rev. C 82, 055804",
    doi: "10.1103/PhysRevC.82.055804",
    basis: "experiment",
  },
  ls09: {
    citation: "Li et al. 2010, Sci. China G 53, 658 (authors and pages from memory)",
    doi: "10.1007/s11433-010-0128-8",
    basis: "experiment",
  },
  mafo: { citation: "Malaney & Fowler 1988, ApJ 333, 14", basis: "estimate" },
  me20: {
    citation: "Meyer et al. 2020, Phys. Rev. C 102, 035803 (citation from memory, uncertain)",
    basis: "experiment",
  },
  nac2: {
    citation: "Xu et al. (NACRE II) 2013, Nucl. Phys. A 918, 61",
    doi: "10.1016/j.nuclphysa.2013.09.007",
    basis: "evaluation",
  },
  nacr: {
    citation: "Angulo et al. (NACRE) 1999, Nucl. Phys. A 656, 3",
    doi: "10.1016/S0375-9474(99)00030-5",
    basis: "evaluation",
  },
  nk06: {
    citation: "Nagai et al. 2006, Phys. Rev. C 74, 025804",
    doi: "10.1103/PhysRevC.74.025804",
    basis: "experiment",
  },
  nw00: {
    citation: "Nelson et al. 2000, Nucl. Phys. A 679, 199",
    doi: "10.1016/S0375-9474(00)00341-9",
    basis: "evaluation",
  },
  pt05: { citation: "Pizzone et al. 2005, A&A 438, 779", basis: "experiment" },
  rpsm: { citation: "Rauscher 1999, statistical-model rates, private communication to REACLIB", basis: "theory" },
  tu19: {
    citation: "Tursunov et al. 2020, Nucl. Phys. A 1000, 121884",
    doi: "10.1016/j.nuclphysa.2020.121884",
    basis: "theory",
  },
  wa19: {
    citation: "Wallner et al. 2019, Phys. Rev. C 99, 015804",
    doi: "10.1103/PhysRevC.99.015804",
    basis: "experiment",
  },
  wag: { citation: "Wagoner 1969, ApJS 18, 247", doi: "10.1086/190191", basis: "estimate" },
  wc12: { citation: "Tuli 2012, Nuclear Wallet Cards, National Nuclear Data Center", basis: "evaluation" },
  wc17: { citation: "Nuclear Wallet Cards 2017, National Nuclear Data Center", basis: "evaluation" },
  wfh: { citation: "Wagoner, Fowler, Hoyle 1967, ApJ 148, 3", doi: "10.1086/149126", basis: "estimate" },
  wies: { citation: "Wiescher 2000, various rates, communicated to REACLIB", basis: "estimate" },
};

/** Provenance of sets taken from the compilation as they stand. @param labels labels of the sets that are summed */
export function compilationProvenance(labels: readonly string[], origin: string, note?: string): Provenance {
  const sources = labels.map((label) => {
    if (!LABELS[label]) throw new Error(`label ${label} has no citation in rate-sources.ts`);
    return LABELS[label];
  });
  const papers = sources.map((source, i) => `${labels[i]} = ${source.citation}`).join("; ");
  return {
    citation: `${REACLIB}; ${papers}`,
    ...(sources.length === 1 && sources[0].doi ? { doi: sources[0].doi } : {}),
    origin,
    basis: sources[0].basis,
    uncertaintyBasis: "assumed",
    note: note ? `${ASSUMED}; ${note}` : ASSUMED,
  };
}
