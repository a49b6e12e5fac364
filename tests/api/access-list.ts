import type { AccessWorld } from './access-world';

/** Everybody there is, seen from one machine, its owner's shelf, one shop and the installation. */
export const kinds = ['anonymous', 'stranger', 'helper', 'owner', 'technician', 'steward'] as const;
export type Kind = (typeof kinds)[number];

const everybody: readonly Kind[] = kinds;
const signedIn: readonly Kind[] = ['stranger', 'helper', 'owner', 'technician', 'steward'];
const ridersOfTheMachine: readonly Kind[] = ['helper', 'owner'];
/** No entry 0 holds this picture. */
const blackOut = {
  picture: 'ab'.repeat(32),
  boxes: JSON.stringify([{ left: 0, top: 0, width: 0.5, height: 0.5 }]),
  reason: '',
};
const ownerOnly: readonly Kind[] = ['owner'];
const stewardOnly: readonly Kind[] = ['steward'];
const technicianOnly: readonly Kind[] = ['technician'];

export interface Reach {
  who: readonly Kind[];
  /** Those who may see the thing, and are told in words that they may not do this with it. */
  told?: readonly Kind[];
  /** For what is guarded by an object: the address (and form or body) that names it. */
  at?: (world: AccessWorld) => string;
  /** Somebody not signed in is told "not found" too, instead of being asked to sign in. */
  isHiddenFromStrangers?: true;
}
interface RouteReach extends Reach {
  /** Answers what pages of other sites send: for programs, and it changes nothing of anybody. */
  isCrossSite?: boolean;
  json?: (world: AccessWorld) => unknown;
}
interface ActionReach extends Pick<Reach, 'who' | 'told'> {
  /** A page that uses the action. */
  on: (world: AccessWorld) => string;
  /** Good enough to reach the question of access; a form that is refused before it would prove nothing. */
  form?: (world: AccessWorld) => Record<string, string>;
}

/** By file under app/. An address without brackets follows from the file. */
export const pages: Record<string, Reach> = {
  'page.tsx': { who: everybody },
  'garage/page.tsx': { who: everybody },
  '(public)/sign-up/page.tsx': { who: everybody },
  '(public)/sign-in/page.tsx': { who: everybody },
  '(public)/check-mail/page.tsx': { who: everybody },
  '(public)/forgot-password/page.tsx': { who: everybody },
  '(public)/confirm-email/[token]/page.tsx': { who: everybody, at: () => '/confirm-email/no-such-token' },
  '(public)/reset-password/[token]/page.tsx': { who: everybody, at: () => '/reset-password/no-such-token' },
  'keep/[token]/page.tsx': { who: everybody, at: ({ keeperToken }) => `/keep/${keeperToken}` },
  '(rider)/start/page.tsx': { who: signedIn },
  '(rider)/account/page.tsx': { who: signedIn },
  '(rider)/imports/page.tsx': { who: signedIn },
  '(rider)/imports/[import]/page.tsx': { who: ownerOnly, at: (world) => `/imports/${world.import}` },
  '(rider)/imports/incoming/[import]/page.tsx': {
    who: ownerOnly,
    at: ({ stagedImport }) => `/imports/incoming/${stagedImport}`,
  },
  '(rider)/machines/[machine]/export/page.tsx': { who: ownerOnly, at: ({ machine }) => `/machines/${machine}/export` },
  '(rider)/machines/new/page.tsx': { who: signedIn },
  '(rider)/machines/[machine]/page.tsx': { who: ridersOfTheMachine, at: ({ machine }) => `/machines/${machine}` },
  '(rider)/machines/[machine]/record/page.tsx': {
    who: ridersOfTheMachine,
    at: ({ machine }) => `/machines/${machine}/record`,
  },
  '(rider)/machines/[machine]/record/[seq]/page.tsx': {
    who: ridersOfTheMachine,
    at: ({ machine }) => `/machines/${machine}/record/0`,
  },
  '(rider)/machines/[machine]/schedule/page.tsx': {
    who: ridersOfTheMachine,
    at: ({ machine }) => `/machines/${machine}/schedule`,
  },
  '(rider)/machines/[machine]/spec-sheet/page.tsx': {
    who: ridersOfTheMachine,
    at: ({ machine }) => `/machines/${machine}/spec-sheet`,
  },
  '(rider)/machines/[machine]/settings/page.tsx': {
    who: ridersOfTheMachine,
    at: ({ machine }) => `/machines/${machine}/settings`,
  },
  '(rider)/shelves/[shelf]/page.tsx': { who: ridersOfTheMachine, at: ({ shelf }) => `/shelves/${shelf}` },
  '(rider)/shelves/[shelf]/[seq]/page.tsx': { who: ridersOfTheMachine, at: ({ shelf }) => `/shelves/${shelf}/0` },
  '(rider)/worksheets/[worksheet]/review/page.tsx': {
    who: ridersOfTheMachine,
    at: ({ worksheet }) => `/worksheets/${worksheet}/review`,
  },
  '(rider)/machines/[machine]/proof/page.tsx': { who: ownerOnly, at: ({ machine }) => `/machines/${machine}/proof` },
  '(rider)/machines/[machine]/proof/preview/page.tsx': {
    who: ownerOnly,
    at: ({ machine }) => `/machines/${machine}/proof/preview?opens=for-sale`,
  },
  '(rider)/machines/[machine]/record/[seq]/addendum/page.tsx': {
    who: ridersOfTheMachine,
    at: ({ machine }) => `/machines/${machine}/record/0/addendum`,
  },
  '(rider)/machines/[machine]/record/[seq]/strike/page.tsx': {
    who: ownerOnly,
    at: ({ machine }) => `/machines/${machine}/record/0/strike`,
  },
  '(rider)/machines/[machine]/record/[seq]/erase/page.tsx': {
    who: ownerOnly,
    at: ({ machine }) => `/machines/${machine}/record/0/erase`,
  },
  '(rider)/shelves/[shelf]/[seq]/strike/page.tsx': {
    who: ownerOnly,
    at: ({ shelf }) => `/shelves/${shelf}/0/strike`,
  },
  '(rider)/machines/[machine]/record/[seq]/black-out/page.tsx': {
    who: ownerOnly,
    at: ({ machine }) => `/machines/${machine}/record/0/black-out`,
  },
  '(rider)/shelves/[shelf]/[seq]/black-out/page.tsx': {
    who: ownerOnly,
    at: ({ shelf }) => `/shelves/${shelf}/0/black-out`,
  },
  '(rider)/shelves/[shelf]/[seq]/erase/page.tsx': { who: ownerOnly, at: ({ shelf }) => `/shelves/${shelf}/0/erase` },
  '(rider)/machines/[machine]/record/[seq]/countersign/page.tsx': {
    who: ownerOnly,
    at: ({ machine }) => `/machines/${machine}/record/0/countersign`,
  },
  '(rider)/shops/[shop]/page.tsx': { who: technicianOnly, at: ({ shop }) => `/shops/${shop}` },
  '(public)/verify/page.tsx': { who: everybody },
  '(public)/method/page.tsx': { who: everybody },
  // Everybody's browser came by the address here; what one that did not is told stands in proof.test.ts.
  'view/[link]/page.tsx': { who: everybody, at: ({ link }) => `/view/${link}` },
  'view/[link]/entries/[seq]/page.tsx': { who: everybody, at: ({ link }) => `/view/${link}/entries/0` },
  'countersign/answer/[invitation]/page.tsx': {
    who: everybody,
    at: ({ invitation }) => `/countersign/answer/${invitation}`,
  },
  '(steward)/steward/page.tsx': { who: stewardOnly },
  '(steward)/steward/shops/page.tsx': { who: stewardOnly },
  '(steward)/steward/mail/page.tsx': { who: stewardOnly },
  '(steward)/steward/mail/[name]/page.tsx': { who: stewardOnly, at: ({ mail }) => `/steward/mail/${mail}` },
};

/** By method and file under app/. */
export const routes: Record<string, RouteReach> = {
  'GET api/health/route.ts': { who: everybody },
  'GET api/log-keys/route.ts': { who: everybody },
  'GET api/logs/[log]/checkpoint/route.ts': { who: everybody, at: ({ log }) => `/api/logs/${log}/checkpoint` },
  'GET api/packet-certificate/root.pem/route.ts': { who: everybody },
  'GET api/keep/[token]/stop/route.ts': { who: everybody, at: ({ keeperToken }) => `/api/keep/${keeperToken}/stop` },
  // Mail programs post here from wherever they are (RFC 8058).
  'POST api/keep/[token]/stop/route.ts': {
    who: everybody,
    isCrossSite: true,
    at: ({ keeperToken }) => `/api/keep/${keeperToken}/stop`,
  },
  'GET api/steward/record-check/route.ts': { who: stewardOnly },
  'GET api/time-stamp/root.pem/route.ts': { who: everybody },
  'POST api/time-stamp/route.ts': { who: everybody, isCrossSite: true },
  'POST api/machines/[machine]/packets/route.ts': {
    who: ownerOnly,
    at: ({ machine }) => `/api/machines/${machine}/packets`,
    json: () => ({ purpose: 'For the service desk' }),
  },
  'GET api/machines/[machine]/export/route.ts': {
    who: ownerOnly,
    at: ({ machine }) => `/api/machines/${machine}/export`,
  },
  'GET api/machines/[machine]/record.json/route.ts': {
    who: ownerOnly,
    at: ({ machine }) => `/api/machines/${machine}/record.json`,
  },
  // Nothing was sent, which is no ZIP: whoever is told so was let in.
  'POST api/imports/route.ts': { who: signedIn },
  'GET api/imports/[import]/file/route.ts': { who: ownerOnly, at: (world) => `/api/imports/${world.import}/file` },
  // The stored bytes are no picture, which its holder learns as "not found" too; imports.test.ts has real ones.
  'GET api/imports/[import]/files/[sha256]/[kind]/route.ts': {
    who: [],
    at: (world) => `/api/imports/${world.import}/files/${world.plate}/thumb`,
  },
  'GET api/packets/[packet]/route.ts': { who: ownerOnly, at: ({ packet }) => `/api/packets/${packet}` },
  'GET api/packets/[packet]/file/route.ts': { who: ownerOnly, at: ({ packet }) => `/api/packets/${packet}/file` },
  'GET api/garage/route.ts': { who: signedIn },
  'POST api/drafts/route.ts': {
    who: ridersOfTheMachine,
    json: ({ machine }) => ({ id: crypto.randomUUID(), kind: 'worksheet', subject: machine }),
  },
  'GET api/drafts/[draft]/route.ts': { who: ridersOfTheMachine, at: ({ worksheet }) => `/api/drafts/${worksheet}` },
  'POST api/drafts/[draft]/route.ts': {
    who: ridersOfTheMachine,
    at: ({ worksheet }) => `/api/drafts/${worksheet}`,
    json: () => ({ changes: [] }),
  },
  // This worksheet was begun by the owner: a helper may move only one of their own.
  'PATCH api/drafts/[draft]/route.ts': {
    who: ownerOnly,
    told: ['helper'],
    at: ({ worksheet }) => `/api/drafts/${worksheet}`,
    json: ({ machine }) => ({ subject: machine }),
  },
  'DELETE api/drafts/[draft]/route.ts': {
    who: ridersOfTheMachine,
    at: ({ discarded }) => `/api/drafts/${discarded}`,
  },
  'POST api/drafts/[draft]/confirm-receipt/route.ts': {
    who: ownerOnly,
    told: ['helper'],
    at: ({ receipt }) => `/api/drafts/${receipt}/confirm-receipt`,
    json: () => ({}),
  },
  'POST api/uploads/route.ts': {
    who: ridersOfTheMachine,
    at: ({ worksheet }) => `/api/uploads?id=${crypto.randomUUID()}&draft=${worksheet}&name=plate.jpg`,
  },
  'GET v/[token]/route.ts': { who: everybody, at: ({ linkToken }) => `/v/${linkToken}` },
  'GET view/[link]/ended/route.ts': { who: everybody, at: ({ link }) => `/view/${link}/ended` },
  'GET countersign/[token]/route.ts': {
    who: everybody,
    at: ({ invitationToken }) => `/countersign/${invitationToken}`,
  },
  'GET countersign/answer/[invitation]/ended/route.ts': {
    who: everybody,
    at: ({ invitation }) => `/countersign/answer/${invitation}/ended`,
  },
  'GET api/view/[link]/files/[sha256]/[kind]/route.ts': {
    who: everybody,
    at: ({ link, plate }) => `/api/view/${link}/files/${plate}/thumb`,
  },
  'GET api/view/[link]/packet/route.ts': { who: everybody, at: ({ link }) => `/api/view/${link}/packet` },
  'GET api/view/[link]/record.json/route.ts': { who: everybody, at: ({ link }) => `/api/view/${link}/record.json` },
  'GET countersign/answer/[invitation]/files/[sha256]/[kind]/route.ts': {
    // The picture stands on another entry than the one that was asked about.
    who: [],
    isHiddenFromStrangers: true,
    at: ({ invitation, plate }) => `/countersign/answer/${invitation}/files/${plate}/thumb`,
  },
  'GET (public)/verify.mjs/route.ts': { who: everybody },
  'GET (public)/verify.html/route.ts': { who: everybody },
  'GET api/files/[sha256]/[kind]/route.ts': {
    who: ridersOfTheMachine,
    at: ({ machine, plate }) => `/api/files/${plate}/copy?for=${machine}`,
  },
};

/** Of the form that a browser sends, and signed by nobody. */
const noSignature = JSON.stringify({
  id: 'AAAA',
  rawId: 'AAAA',
  type: 'public-key',
  response: { clientDataJSON: 'AAAA', authenticatorData: 'AAAA', signature: 'AAAA' },
  clientExtensionResults: {},
});

/** By file under app/ and exported name. */
export const actions: Record<string, ActionReach> = {
  '(public)/sign-up/actions.ts signUpAction': { who: everybody, on: () => '/sign-up' },
  '(public)/sign-in/actions.ts signInAction': { who: everybody, on: () => '/sign-in' },
  '(public)/sign-in/actions.ts signOutAction': { who: everybody, on: () => '/account' },
  '(public)/forgot-password/actions.ts forgotPasswordAction': { who: everybody, on: () => '/forgot-password' },
  '(public)/confirm-email/[token]/actions.ts confirmEmailAction': {
    who: everybody,
    on: () => '/confirm-email/no-such-token',
  },
  '(public)/reset-password/[token]/actions.ts resetPasswordAction': {
    who: everybody,
    on: () => '/reset-password/no-such-token',
  },
  // Setting up a machine makes a new one; `authorise` guards only the way back to one that is there.
  '(rider)/machines/new/actions.ts setUpMachine': { who: signedIn, on: () => '/machines/new' },
  '(rider)/worksheets/[worksheet]/review/actions.ts seal': {
    who: ownerOnly,
    told: ['helper'],
    on: ({ worksheet }) => `/worksheets/${worksheet}/review`,
    form: ({ worksheet }) => ({ worksheet, reviewed: 'what was shown' }),
  },
  '(rider)/machines/[machine]/proof/actions.ts buildPacketAction': {
    who: ownerOnly,
    on: ({ machine }) => `/machines/${machine}/proof`,
    form: ({ machine }) => ({ machine, purpose: '' }),
  },
  '(rider)/machines/[machine]/proof/actions.ts makeLinkAction': {
    who: ownerOnly,
    on: ({ machine }) => `/machines/${machine}/proof`,
    form: ({ machine }) => ({ machine, label: 'A third reader', lasts: '30-days' }),
  },
  '(rider)/machines/[machine]/proof/actions.ts revokeLinkAction': {
    who: ownerOnly,
    on: ({ machine }) => `/machines/${machine}/proof`,
    form: ({ spareLink }) => ({ link: spareLink }),
  },
  'countersign/answer/[invitation]/actions.ts answerAction': {
    who: technicianOnly,
    on: ({ invitation }) => `/countersign/answer/${invitation}`,
    form: ({ invitation, shop }) => ({ invitation, shop, answer: 'decline', reason: '' }),
  },
  // What is asked of the opening below is refused to its owner in words, and to everybody else as not there.
  '(rider)/machines/[machine]/record/[seq]/strike/actions.ts strikeAction': {
    who: ownerOnly,
    on: ({ machine }) => `/machines/${machine}/record/0/strike`,
    form: ({ machine }) => ({ machine, seq: '0', reason: 'A mistake.', key: crypto.randomUUID() }),
  },
  '(rider)/machines/[machine]/record/[seq]/erase/actions.ts eraseAction': {
    who: ownerOnly,
    on: ({ machine }) => `/machines/${machine}/record/0/erase`,
    form: ({ machine }) => ({ machine, seq: '0', part: 'prices', word: 'erase', reason: '', key: crypto.randomUUID() }),
  },
  '(rider)/machines/[machine]/record/[seq]/addendum/actions.ts sealAddendumAction': {
    who: ownerOnly,
    told: ['helper'],
    on: ({ machine }) => `/machines/${machine}/record/0/addendum`,
    form: ({ addendum }) => ({ draft: addendum, shown: 'what was shown' }),
  },
  '(rider)/shelves/[shelf]/[seq]/strike/actions.ts strikeLineAction': {
    who: ownerOnly,
    on: ({ shelf }) => `/shelves/${shelf}/0/strike`,
    form: ({ shelf }) => ({ shelf, seq: '0', reason: 'A mistake.', key: crypto.randomUUID() }),
  },
  '(rider)/shelves/[shelf]/[seq]/erase/actions.ts eraseLineAction': {
    who: ownerOnly,
    on: ({ shelf }) => `/shelves/${shelf}/0/erase`,
    form: ({ shelf }) => ({ shelf, seq: '0', part: 'prices', word: 'erase', reason: '', key: crypto.randomUUID() }),
  },
  '(rider)/machines/[machine]/record/[seq]/black-out/actions.ts blackOutAction': {
    who: ownerOnly,
    on: ({ machine }) => `/machines/${machine}/record/0/black-out`,
    form: ({ machine }) => ({ machine, seq: '0', ...blackOut, key: crypto.randomUUID() }),
  },
  '(rider)/shelves/[shelf]/[seq]/black-out/actions.ts blackOutLineAction': {
    who: ownerOnly,
    on: ({ shelf }) => `/shelves/${shelf}/0/black-out`,
    form: ({ shelf }) => ({ shelf, seq: '0', ...blackOut, key: crypto.randomUUID() }),
  },
  // Entry 0 is no service, which the owner is told and nobody else learns.
  '(rider)/machines/[machine]/record/[seq]/countersign/actions.ts inviteAction': {
    who: ownerOnly,
    on: ({ machine }) => `/machines/${machine}/record/0/countersign`,
    form: ({ machine }) => ({ machine, seq: '0', email: 'workshop@halyard.example', message: '' }),
  },
  '(rider)/machines/[machine]/record/[seq]/countersign/actions.ts withdrawAction': {
    who: ownerOnly,
    on: ({ machine }) => `/machines/${machine}/record/0/countersign`,
    // It is answered by now, which the owner is told.
    form: ({ invitation }) => ({ invitation }),
  },
  'countersign/answer/[invitation]/actions.ts nameShopAction': {
    who: signedIn,
    on: ({ invitation }) => `/countersign/answer/${invitation}`,
    form: ({ invitation }) => ({ invitation, name: 'A shop', address: '1 Quay Street, Halyard' }),
  },
  '(rider)/imports/actions.ts recheckImportAction': {
    who: ownerOnly,
    on: ({ stagedImport }) => `/imports/incoming/${stagedImport}`,
    form: ({ stagedImport }) => ({ import: stagedImport, key: 'no key' }),
  },
  // The very file is kept already, which its holder is told.
  '(rider)/imports/actions.ts keepImportAction': {
    who: ownerOnly,
    on: ({ stagedImport }) => `/imports/incoming/${stagedImport}`,
    form: ({ stagedImport }) => ({ import: stagedImport }),
  },
  '(rider)/imports/actions.ts discardImportAction': {
    who: ownerOnly,
    on: ({ stagedImport }) => `/imports/incoming/${stagedImport}`,
    form: ({ stagedImport }) => ({ import: stagedImport }),
  },
  '(rider)/imports/actions.ts removeImportAction': {
    who: ownerOnly,
    on: (world) => `/imports/${world.import}`,
    form: (world) => ({ import: world.import }),
  },
  '(rider)/account/actions.ts changeAccountAction': { who: signedIn, on: () => '/account' },
  '(rider)/account/actions.ts changePasswordAction': { who: signedIn, on: () => '/account' },
  '(rider)/account/passkey-actions.ts beginPasskeyAction': { who: signedIn, on: () => '/account' },
  '(rider)/account/passkey-actions.ts addPasskeyAction': { who: signedIn, on: () => '/account' },
  '(rider)/account/passkey-actions.ts removePasskeyAction': {
    who: ownerOnly,
    on: () => '/account',
    form: ({ passkey }) => ({ passkey }),
  },
  '(rider)/machines/[machine]/record/[seq]/sign-actions.ts prepareSignatureAction': {
    who: ownerOnly,
    on: ({ machine }) => `/machines/${machine}/record/0`,
    form: ({ machine }) => ({ machine, seq: '0' }),
  },
  // The answer is none, which only whoever was asked is told.
  '(rider)/machines/[machine]/record/[seq]/sign-actions.ts signEntryAction': {
    who: ownerOnly,
    on: ({ machine }) => `/machines/${machine}/record/0`,
    form: ({ challenge }) => ({ challenge, response: noSignature }),
  },
  'countersign/answer/[invitation]/actions.ts signCountersignatureAction': {
    who: technicianOnly,
    on: ({ invitation }) => `/countersign/answer/${invitation}`,
    form: ({ invitation, shopChallenge }) => ({ invitation, challenge: shopChallenge, response: noSignature }),
  },
  '(rider)/account/actions.ts endOneAction': { who: signedIn, on: () => '/account' },
  '(rider)/account/actions.ts endOthersAction': { who: signedIn, on: () => '/account' },
  '(rider)/machines/[machine]/proof/keeper-actions.ts askKeeperAction': {
    who: ownerOnly,
    on: ({ machine }) => `/machines/${machine}/proof`,
    form: ({ machine }) => ({ machine, email: 'keeper@post.example' }),
  },
  '(rider)/machines/[machine]/proof/keeper-actions.ts removeKeeperAction': {
    who: ownerOnly,
    on: ({ machine }) => `/machines/${machine}/proof`,
    form: ({ keeper }) => ({ keeper }),
  },
  'keep/[token]/actions.ts agreeToKeepAction': {
    who: everybody,
    on: ({ keeperToken }) => `/keep/${keeperToken}`,
    form: ({ keeperToken }) => ({ token: keeperToken }),
  },
  'keep/[token]/actions.ts stopKeepingAction': {
    who: everybody,
    on: ({ keeperToken }) => `/keep/${keeperToken}`,
    form: ({ keeperToken }) => ({ token: keeperToken }),
  },
  '(steward)/steward/actions.ts checkRecordsAction': { who: stewardOnly, on: () => '/steward' },
  '(steward)/steward/shops/actions.ts confirmShopAction': {
    who: stewardOnly,
    on: () => '/steward/shops',
    form: ({ shop }) => ({ shop }),
  },
};
