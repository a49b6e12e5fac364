import { isJsonObject, parseJson } from './canonical';
import { parseLeaf } from './leaf';

/** `<log>/<seq>` of a line → the earlier line of the same log that it is about. */
export type AboutLines = Record<string, number>;

/**
 * What each line of a record is about, as its leaf says. Lines that cannot be read are about nothing. Never throws.
 *
 * @example aboutLines(bundleText) // { '81378169-0778-4d15-9849-273f84f8f77c/16': 15 }
 */
export function aboutLines(bundleText: string): AboutLines {
  const about: AboutLines = {};
  try {
    const bundle = parseJson(bundleText);
    for (const log of isJsonObject(bundle) && Array.isArray(bundle.logs) ? bundle.logs : []) {
      for (const entry of log.entries) {
        const { seq, refersTo } = parseLeaf(entry.leaf);
        if (refersTo !== null && refersTo.seq < seq) about[`${log.id}/${seq}`] = refersTo.seq;
      }
    }
  } catch {
    // What stands before the line that cannot be read counts; the check names that line.
  }
  return about;
}
