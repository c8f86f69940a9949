/** What an archive may be. An export past these is refused as well, so that each export verifies. */
export type ZipLimits = {
  /** Of the packed archive. */
  archiveBytes: number;
  files: number;
  /** Of one unpacked file. */
  fileBytes: number;
  /** Of all unpacked files together. */
  totalBytes: number;
  /** Unpacked over packed, for files of a mebibyte or more; deflate itself stops at 1032. */
  ratio: number;
};

const MEBIBYTE = 2 ** 20;

/** Some 200,000 measurements unpack to 100 MiB. ZIP without its 64-bit extension ends at 65,535 files. */
export const ZIP_LIMITS: ZipLimits = {
  archiveBytes: 512 * MEBIBYTE,
  files: 65_535,
  fileBytes: 256 * MEBIBYTE,
  totalBytes: 1024 * MEBIBYTE,
  ratio: 500,
};

/** Below this size no ratio makes a bomb. */
export const RATIO_FROM_BYTES = MEBIBYTE;
