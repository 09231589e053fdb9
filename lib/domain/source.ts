/** What a source is, which says how far its wavelength can be trusted. */
export const SOURCE_KINDS = [
  'stabilised-laser',
  'free-running-he-ne',
  'lamp-line',
  'atomic-line',
  'product',
] as const;
/** Sources from before kinds were asked for have said none. */
export type SourceKind = (typeof SOURCE_KINDS)[number] | 'unstated';

export const SOURCE_KIND_WORDS: Record<SourceKind, string> = {
  'stabilised-laser': 'stabilised laser',
  'free-running-he-ne': 'free-running He-Ne laser',
  'lamp-line': 'lamp line',
  'atomic-line': 'laser locked to an atomic line',
  product: 'product',
  unstated: 'kind not stated',
};
