/** Largest file, in bytes. */
export const largestFile = 10 * 1024 * 1024;

/** All files of one organisation together, in bytes. Deleted ones count until they are removed for good. */
export const organisationQuota = 500 * 1024 * 1024;

/** Most pixels of a picture: an A3 sheet scanned at 400 dots per inch has 31 million. */
export const mostPixels = 50_000_000;
export const longestSide = 20_000;
