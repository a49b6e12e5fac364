/** A packet with every picture of many years stays far below; a browser reads no more than two such into memory. */
export const maxFileBytes = 1_000_000_000;
export const maxFileWords = '1 GB';

/** Twenty thousand entries, the most that a record may hold, take well under a minute on a slow phone. */
export const maxCheckMilliseconds = 180_000;

/** As many lines of a log, and characters of one text, are shown at once: a hostile file has millions. */
export const linesAtOnce = 200;
export const charactersShown = 4000;
