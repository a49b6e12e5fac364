/** Every way in which a record can turn out to be altered, each with its meaning. A closed list. */
export const alterationCodes = {
  'leaf-changed': 'A line is not of the form that every line has.',
  'not-canonical': 'Text was written down again in another spelling, so it is not the text that was sealed.',
  'chain-broken': 'A line does not follow from the line before it.',
  'time-order': 'A line says that it was sealed before the line that stands before it.',
  'root-mismatch': 'A signed root does not belong to these lines.',
  'bad-signature': 'A signature does not belong to what it stands under.',
  'unknown-key': 'Something was signed with a key that is not the one to check with.',
  'bundle-changed': 'The file as a whole is not what its signature was made for, or not of its form.',
  'part-mismatch': 'An opened part is not the part that was sealed.',
  'reference-broken': 'A line refers to something that is not there, or not what it was.',
  'token-invalid': 'A time stamp does not hold, or does not belong to the signed root that it hangs on.',
  'statement-signature-invalid': 'A signature made on a person’s own device does not hold.',
  'entries-missing': 'Lines that must be there are not.',
  'file-changed': 'A file is not the one that was sealed.',
  'file-unbound': 'A file belongs to no opened part.',
  'pages-changed': 'The pages of the packet were changed after it was signed.',
  forked: 'The log has two different pasts.',
} as const;
export type AlterationCode = keyof typeof alterationCodes;

/** What a reader should know although nothing is altered. A closed list. */
export const remarkCodes = {
  'key-from-file': 'The key was taken from the file itself.',
  'not-time-stamped': 'Lines are covered by no time stamp.',
  'authority-unknown': 'A time stamp is not shown to be independent.',
  'stamped-late': 'The proven time is more than 72 hours after sealing.',
  'clock-off': 'A time stamp is older than the sealing time of a line that it covers.',
  withheld: 'Parts are withheld.',
  'file-missing': 'A file that the record lists is not at hand.',
  'copy-by-installation': 'A copy was made after sealing, by the installation.',
  'pages-not-checked': 'The pages of the packet were not checked, only the record inside it.',
  'other-log': 'Another log is named or given that cannot be compared.',
} as const;
export type RemarkCode = keyof typeof remarkCodes;
