/** Goes with every export, certificate and citation. */
export const caution = [
  'Results are about methods, not about patients or plant: not for diagnosis, not a safety case.',
  'Measurements on people need ethics approval and de-identified data. Current injection into people or animals is bound by the applicable electrical-safety standard (IEC 60601-1 and local rules) and the judgement of licensed practitioners.',
] as const;
