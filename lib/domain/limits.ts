/** Limits stated once; every screen and sentence that names one reads it here. */
export const LIMITS = {
  fileBytes: 200 * 1024 * 1024,
  filePixels: 100_000_000,
  filesAtOnce: 500,
  pageRows: 25,
  passwordShortest: 12,
  passwordLongest: 256,
  resetMinutes: 30,
  serialLength: 60,
  unitsAtOnce: 5000,
  wordsLength: 1000,
  trialsAtOnce: 100,
  sheetReadings: 60,
  /** A password typed to sign counts for further signatures this long. */
  passwordMinutes: 5,
} as const;
