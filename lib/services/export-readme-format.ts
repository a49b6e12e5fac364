import 'server-only';

/**
 * The second half of an export's README.txt: the record's form, in enough words to write a checker from. It names the
 * standards and does not lean on any program of this project.
 */
export const readmeFormat = `HOW THE RECORD IS BUILT
=======================

Everything that has to be checked is in record.json. It is one JSON object
in UTF-8, and it must be, byte for byte, its own canonical form as RFC 8785
has it: members sorted by name, no white space, one spelling for each
character. A file that says the same in another spelling was written again
by somebody else.

  format             "witnessmark/bundle/1"
  madeAt             when this file was made, UTC
  purpose, number    what for, and the number of this file
  verifierKeys       public keys, newest first (see SIGNED NOTES)
  packetCertificate  null in an export
  logs               first the machine's log, then a log for each shelf
                     from which oil or parts of this machine were taken
  files              the files beside it: SHA-256, path, media type, length,
                     whether it is included, and derivedFrom: for a copy
                     made later, the SHA-256 of the sealed file it was made
                     of, else null
  signature          a signed note over the whole (see below)

Each log has: id (a UUID), subject ("machine" or "shelf"), origin (the name
of the installation when the log was begun), checkpoint (a signed note) and
entries. Each entry has: leaf (a text), parts (texts), and seal: checkpoint
(a signed note) and tokens (time stamps, base64).

HASHES. "SHA-256" is FIPS 180-4. Hexadecimal is lower case. base64 and
base64url are RFC 4648; base64url stands without "=".

LEAF. The text of a leaf is the RFC 8785 form of an object with exactly
these members: format ("witnessmark/leaf/1"), log (the log's id), seq (its
number, from 0 without a gap), previous (the leaf hash of the entry before,
in hexadecimal; null for number 0), kind, sealedAt (UTC; it never runs
backwards), refersTo (null, or seq and leafHash of an earlier entry of the
same log), and parts: a list of name and digest, sorted by name, each name
once. The leaf hash is SHA-256 over one byte 00 and then the leaf's bytes.

PARTS. What an entry says stands in its parts, so that a part can be held
back without breaking the record. A part is a disclosure in the form of
RFC 9901, section 4.2.1: the base64url form of a JSON array [salt, name,
value], itself in RFC 8785 form. The salt is 22 characters. The digest in
the leaf is the base64url form of SHA-256 over the characters of the
disclosure, in ASCII. A part that the leaf names and the file does not
bring was held back, or erased for good by destroying it; which parts those
are can be seen, and what they said cannot.

TREE. The leaf hashes of a log form a Merkle tree as in RFC 6962, section
2.1: the hash of a node is SHA-256 over one byte 01, the left hash and the
right hash; the list is split at the largest power of two that is smaller
than its length; the root of one leaf is its leaf hash.

SIGNED NOTES. A signed note (C2SP signed-note) is a text that ends with a
newline, an empty line, and one line: an em dash, a space, the key's name, a
space, and in base64 four bytes of key hash and 64 bytes of Ed25519
signature (RFC 8032) over the text, its last newline included. A verifier
key is written: name, "+", key hash in hexadecimal, "+", and in base64 one
byte 01 and the 32 bytes of the public key. The key hash is the first four
bytes of SHA-256 over the name, a newline (0A), one byte 01 and the public
key. The fingerprint that people compare is SHA-256 of the public key.

CHECKPOINTS (C2SP tlog-checkpoint). The text has three lines: origin, "/"
and the log's id; the number of entries; the root in base64. The seal of
entry n carries the checkpoint of exactly n + 1 entries; the log carries the
one of all its entries. The root must be the one computed from the leaves.

SIGNATURE OF THE FILE. A signed note whose text has three lines:
"witnessmark/bundle/1"; madeAt; and in base64 SHA-256 over the RFC 8785 form
of record.json without its member "signature".

TIME STAMPS. A token is an RFC 3161 time stamp (as RFC 5816 amends it) in
DER, over the whole signed note of the checkpoint it stands beside: text,
empty line and signature line. It shows that this checkpoint, and so every
entry up to it, existed at its time. Whoever signed a token is named in it,
and anybody can sign tokens: it proves something only if its certificate
chain ends in the root of an authority that you know from elsewhere, and
that is not run by the installation. "openssl ts -verify -data NOTE -in
TOKEN -token_in -CAfile ROOT" checks one.

SIGNATURES OF PEOPLE. A "key" entry names a person's public key (SPKI). A
"signature" entry, or the member "signature" of a countersignature, is a
WebAuthn assertion with ES256. Its challenge is SHA-256 over the line
"witnessmark/statement/1", a newline, and the RFC 8785 form of an object
with log, refersTo and body, the body without its signature.

AMOUNTS are texts, as they were typed, beside a unit in UCUM. Money is in
the smallest unit of its currency. Local times carry the name of their zone.

WHAT A CHECK DOES
  1. record.json is its own RFC 8785 form, with the members named above.
  2. Each leaf likewise; its number, log, kind and "previous" are right, and
     sealedAt does not run backwards.
  3. Each part's digest is the one that its leaf names.
  4. Each root is computed anew and is the one in the checkpoints, which are
     signed with the key; so is the signature of the file.
  5. What an entry refers to, or draws from, is there: the leaf hash is the
     one that it names.
  6. SHA-256 and length of each file are those in the list, and those that an
     opened part named "attachments" names for it, as the original or as its
     "copy".
  7. No file lies beside the record that the list does not name, but
     README.txt, verify.mjs and verify.html.
  8. An older file of the same record: its root must be the root of as many
     leaves of this one. If not, the log has two pasts. Keep both files.
`;
