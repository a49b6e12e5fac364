/** Every URL of the product, in one place. Arguments are ids; nothing here checks access. */
export const paths = {
  home: '/',
  method: '/method',
  verify: '/verify',
  /** The one-file check for a reader's own computer. */
  verifyProgram: '/verify.mjs',
  /** The page that checks, as one file that opens from disk. */
  verifyPage: '/verify.html',
  privacy: '/method#what-is-kept',

  signUp: '/sign-up',
  signIn: '/sign-in',
  checkMail: '/check-mail',
  confirmEmail: (token: string) => `/confirm-email/${token}`,
  forgotPassword: '/forgot-password',
  resetPassword: (token: string) => `/reset-password/${token}`,
  account: '/account',
  /** Records from elsewhere: kept to be read, never continued. */
  imports: '/imports',
  import: (id: string) => `/imports/${id}`,
  /** What was found in a file that waits for a decision. */
  stagedImport: (id: string) => `/imports/incoming/${id}`,

  /** Sends a rider to the bench of their first machine, or to set one up. */
  start: '/start',
  newMachine: '/machines/new',
  bench: (machine: string) => `/machines/${machine}`,
  record: (machine: string) => `/machines/${machine}/record`,
  entry: (machine: string, seq: number) => `/machines/${machine}/record/${seq}`,
  addendum: (machine: string, seq: number) => `/machines/${machine}/record/${seq}/addendum`,
  strike: (machine: string, seq: number) => `/machines/${machine}/record/${seq}/strike`,
  erase: (machine: string, seq: number) => `/machines/${machine}/record/${seq}/erase`,
  /** `picture`: SHA-256 of a shared copy; left out, the page asks which. */
  blackOut: (machine: string, seq: number, picture?: string) =>
    `/machines/${machine}/record/${seq}/black-out${picture === undefined ? '' : `?picture=${picture}`}`,
  inviteShop: (machine: string, seq: number) => `/machines/${machine}/record/${seq}/countersign`,
  schedule: (machine: string) => `/machines/${machine}/schedule`,
  specSheet: (machine: string) => `/machines/${machine}/spec-sheet`,
  export: (machine: string) => `/machines/${machine}/export`,
  machineSettings: (machine: string) => `/machines/${machine}/settings`,
  proof: (machine: string) => `/machines/${machine}/proof`,
  /** What a reader would see, before anything is shared; the choice stands in its query. */
  proofPreview: (machine: string) => `/machines/${machine}/proof/preview`,
  /** One rider's shelf (a household may have one). */
  shelf: (shelf: string) => `/shelves/${shelf}`,
  shelfEntry: (shelf: string, seq: number) => `/shelves/${shelf}/${seq}`,
  shelfStrike: (shelf: string, seq: number) => `/shelves/${shelf}/${seq}/strike`,
  shelfErase: (shelf: string, seq: number) => `/shelves/${shelf}/${seq}/erase`,

  shelfBlackOut: (shelf: string, seq: number, picture?: string) =>
    `/shelves/${shelf}/${seq}/black-out${picture === undefined ? '' : `?picture=${picture}`}`,

  /** The offline shell: one public static page; what it shows is chosen by the hash. */
  garage: '/garage',
  worksheet: (worksheet: string) => `/garage#worksheet/${worksheet}`,
  newWorksheet: (machine: string) => `/garage#new-worksheet/${machine}`,
  receipt: (receipt: string) => `/garage#receipt/${receipt}`,
  newReceipt: '/garage#new-receipt',
  /** The review before sealing needs the server. */
  review: (worksheet: string) => `/worksheets/${worksheet}/review`,

  /** A shop's answer to an invitation. The token is swapped for a cookie at the first visit. */
  invitation: (token: string) => `/countersign/${token}`,
  invitationAnswer: (invitation: string) => `/countersign/answer/${invitation}`,
  invitationEnded: (invitation: string) => `/countersign/answer/${invitation}/ended`,
  invitationFile: (invitation: string, sha256: string, kind: 'thumb' | 'plate' | 'copy') =>
    `/countersign/answer/${invitation}/files/${sha256}/${kind}`,
  shop: (shop: string) => `/shops/${shop}`,

  /** What a viewing link's reader sees. */
  viewingLink: (token: string) => `/v/${token}`,
  viewing: (link: string) => `/view/${link}`,
  viewingEnded: (link: string) => `/view/${link}/ended`,
  viewingEntry: (link: string, seq: number) => `/view/${link}/entries/${seq}`,

  /** Where an address says whether it keeps checkpoints of a record. */
  keeper: (token: string) => `/keep/${token}`,

  steward: '/steward',
  stewardMail: '/steward/mail',
  stewardMailMessage: (name: string) => `/steward/mail/${name}`,
  stewardShops: '/steward/shops',

  api: {
    uploads: '/api/uploads',
    /** `kind`: thumb | plate (re-encoded copies) or original (as an attachment). */
    file: (sha256: string, kind: 'thumb' | 'plate' | 'copy' | 'original', machineOrShelf: string) =>
      `/api/files/${sha256}/${kind}?for=${machineOrShelf}`,
    viewingFile: (link: string, sha256: string, kind: 'thumb' | 'plate' | 'copy') =>
      `/api/view/${link}/files/${sha256}/${kind}`,
    viewingPacket: (link: string) => `/api/view/${link}/packet`,
    viewingBundle: (link: string) => `/api/view/${link}/record.json`,
    garage: '/api/garage',
    drafts: '/api/drafts',
    draft: (draft: string) => `/api/drafts/${draft}`,
    confirmReceipt: (draft: string) => `/api/drafts/${draft}/confirm-receipt`,
    packets: (machine: string) => `/api/machines/${machine}/packets`,
    packet: (packet: string) => `/api/packets/${packet}`,
    packetFile: (packet: string) => `/api/packets/${packet}/file`,
    record: (machine: string) => `/api/machines/${machine}/record.json`,
    /** The whole record as a ZIP, with the original files or with the shared copies alone. */
    export: (machine: string, files: 'originals' | 'copies') => `/api/machines/${machine}/export?files=${files}`,
    imports: '/api/imports',
    importFile: (id: string) => `/api/imports/${id}/file`,
    importPicture: (id: string, sha256: string, kind: 'thumb' | 'plate') =>
      `/api/imports/${id}/files/${sha256}/${kind}`,
    logKeys: '/api/log-keys',
    checkpoint: (log: string) => `/api/logs/${log}/checkpoint`,
    keeperStop: (token: string) => `/api/keep/${token}/stop`,
    timeStamp: '/api/time-stamp',
    timeStampRoot: '/api/time-stamp/root.pem',
    /** The root behind the certificate that signs packets. */
    packetRoot: '/api/packet-certificate/root.pem',
    recordCheck: '/api/steward/record-check',
    health: '/api/health',
  },
} as const;
