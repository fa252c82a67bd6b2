/** How a figure is known, as the brackets in a source say: [R3] read, [C] computed, [M] remembered. */

/** Documents that were read; numbers and words are those of docs/check-values.md section 15. */
export const DOCUMENTS = {
  R1: "two open-source acoustics libraries' copies of IEC 61672-1:2013 Table 3",
  R2: "one library's copy of IEC 60942:2017 Tables 2, 4, 7",
  R3: "same, IEC 60268-1:1985 cl. 7, Table II and IEC 60268-7:2010",
  R4: "same, notes on IEC 60268-3 cl. 14.12, IEC 61260-1:2014 annexes E, F, ISO 9612 example report",
  R5: "OSHA 1910.95 App. A, two web copies",
  R7: "NIOSH 98-126 record, CDC noise page, a table reprint in an engineering reference, industrial-hygiene calculator note",
  R8: "Directive 2003/10/EC Art. 3 text; EU SCENIHR (2008) Table 3",
  R9: "ITU-T H.871 summary, H.870 (03/2022) contents page, two secondary pages",
  R10: "safe-listening initiative page on the WHO standard",
  R13: "encyclopedia on THD (Blagouchine, Moreau, IEEE Trans. Commun. 59(9), 2011), IEC glossary",
  R14: "Novak et al. paper page",
  R15: "public engineering note reviewing thermal papers and AES2/IEC tests (secondary)",
  R21: "web page printing the ISO 9613-1 formula",
  R22: "public limiter algorithm note",
  R23: "web article on coil heating",
  R24: "public script writing FRD",
  R25: "Microsoft WAVEFORMATEXTENSIBLE reference",
  R26: "encyclopedia on RF64, BS.2088 front matter, open-source ds64 readers",
} as const;
export type DocumentNumber = keyof typeof DOCUMENTS;

/** What the letters mean, for readers. */
export const EVIDENCE = {
  R: "read in the public document of that number; a standard named beside it was seen only there, never in its paid original",
  C: "computed from the stated formula and checked numerically",
  M: "from memory, still to be checked against the original",
} as const;

/** Tags in the brackets of a source, such as ["R1", "C"]; empty where it says nothing. */
export function toEvidence(source: string): string[] {
  const brackets = /\[([^\]]+)\]$/.exec(source)?.[1];
  return brackets === undefined ? [] : brackets.split(/,\s*/);
}
