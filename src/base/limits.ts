/** Everything that can grow has a number here. Documented in DEVELOPERS.md; tested at the limit and one above. */
export const limits = {
  fileSizeBytesMax: 256 * 1024 * 1024,
  pointCountMax: 4 * 1024 * 1024,
  labelCountMax: 200_000,
  blockCountMax: 4096,
  linkDepthMax: 4,
  lineLengthMax: 1024 * 1024,
  methodSizeBytesMax: 1024 * 1024,
  speciesCountMax: 100,
  signalCountMax: 500,
} as const;
