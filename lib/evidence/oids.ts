/** Object identifiers by name, with where they are given. */
export const oids = {
  /** RFC 5652 */
  data: '1.2.840.113549.1.7.1',
  signedData: '1.2.840.113549.1.7.2',
  contentType: '1.2.840.113549.1.9.3',
  messageDigest: '1.2.840.113549.1.9.4',
  signingTime: '1.2.840.113549.1.9.5',
  /** RFC 3161 §2.4.2 */
  tstInfo: '1.2.840.113549.1.9.16.1.4',
  timeStampToken: '1.2.840.113549.1.9.16.2.14',
  timeStamping: '1.3.6.1.5.5.7.3.8',
  /** RFC 2634 §5.4 and RFC 5035 §3 */
  signingCertificate: '1.2.840.113549.1.9.16.2.12',
  signingCertificateV2: '1.2.840.113549.1.9.16.2.47',
  /** RFC 5480 §2.1.1 */
  ecPublicKey: '1.2.840.10045.2.1',
  p256: '1.2.840.10045.3.1.7',
  p384: '1.3.132.0.34',
  p521: '1.3.132.0.35',
  /** RFC 5754, RFC 5758 and RFC 8017 app. A */
  sha256: '2.16.840.1.101.3.4.2.1',
  sha384: '2.16.840.1.101.3.4.2.2',
  sha512: '2.16.840.1.101.3.4.2.3',
  ecdsaWithSha256: '1.2.840.10045.4.3.2',
  ecdsaWithSha384: '1.2.840.10045.4.3.3',
  ecdsaWithSha512: '1.2.840.10045.4.3.4',
  rsaEncryption: '1.2.840.113549.1.1.1',
  mgf1: '1.2.840.113549.1.1.8',
  rsaPss: '1.2.840.113549.1.1.10',
  sha256WithRsa: '1.2.840.113549.1.1.11',
  sha384WithRsa: '1.2.840.113549.1.1.12',
  sha512WithRsa: '1.2.840.113549.1.1.13',
  /** RFC 5280 */
  commonName: '2.5.4.3',
  subjectKeyIdentifier: '2.5.29.14',
  keyUsage: '2.5.29.15',
  basicConstraints: '2.5.29.19',
  authorityKeyIdentifier: '2.5.29.35',
  extendedKeyUsage: '2.5.29.37',
  anyExtendedKeyUsage: '2.5.29.37.0',
  /** The own test authority's policy: an arc made from a UUID (ITU-T X.667), so it belongs to nobody else. */
  ownPolicy: '2.25.2343755402485306674376222414515627814',
} as const;
