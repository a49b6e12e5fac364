import { createHash } from 'node:crypto';
import { Readable } from 'node:stream';
import sharp from 'sharp';
import { usualScope } from '@/lib/domain/scope';
import type {
  Attachment,
  AttachmentRole,
  Check,
  Draw,
  Odometer,
  PurchaseBody,
  ServiceBody,
  Task,
  TermsBody,
} from '@/lib/evidence/format';
import { nameFiles, type PacketContent, type PacketFile } from '@/lib/packet/content';
import { readJpegSize } from '@/lib/packet/layer/jpeg';
import type { EntryView, LogView, PurchaseView, RecordView, TokenView } from '@/lib/services/record-view';
import { newCertificate, signerWith } from '../setup/signed-packet';

const zone = 'America/Denver';
const shelfLog = '2d1f6c1e-58c4-4c1f-9a55-0e9a7a0f4b11';
const machineLog = '7b0c6b52-6d0f-4a7e-8a1d-3f3d7f6a9c20';
const owner = '5c1de2b4-13aa-4a0e-8f6d-9a3c51f0d001';
export const sha256 = (text: string | Buffer) => createHash('sha256').update(text).digest('hex');
const miles = (value: string): Odometer => ({ value, unit: '[mi_i]', instrument: 0 });
const manual = (page: string) =>
  ({ kind: 'manual', title: 'Corvane Sorrel 1800 owner’s manual', edition: '2022', page }) as const;
const practice = { kind: 'common-practice' } as const;

/** Words that a packet must carry in every script its typefaces have, and one it must print as boxes. */
export const wordsInEveryScript = {
  greek: 'Έλεγχος λαδιού κινητήρα',
  cyrillic: 'Масло заменено, фильтр новый',
  chinese: '更换机油和滤清器',
  arabic: 'تم تغيير زيت المحرك',
  hebrew: 'שמן מנוע חדש',
  emoji: '🔧',
  thai: 'ไทย',
} as const;

async function photo(title: string, lines: string[], height = 1200): Promise<Buffer> {
  const rows = lines.map(
    (line, i) => `<text x="60" y="${190 + i * 52}" font-size="34" font-family="monospace">${line}</text>`,
  );
  const svg =
    `<svg xmlns="http://www.w3.org/2000/svg" width="900" height="${height}"><rect width="900" height="${height}" fill="#6d6a64"/>` +
    `<g transform="rotate(1.5 450 600)"><rect x="40" y="30" width="820" height="${height - 80}" fill="#f4f2ea"/>` +
    `<text x="60" y="110" font-size="46" font-family="sans-serif">${title}</text>${rows.join('')}</g></svg>`;
  return sharp(Buffer.from(svg)).jpeg({ quality: 75 }).toBuffer();
}

interface Made {
  attachments: Attachment[];
  bytes: Map<string, Buffer>;
}

async function attach(
  made: Made['bytes'],
  role: AttachmentRole,
  caption: string,
  lines: string[],
  on: string,
): Promise<Attachment> {
  const bytes = await photo(caption, lines, role === 'odometer' ? 600 : 1200);
  const hash = sha256(bytes);
  made.set(hash, bytes);
  return {
    sha256: sha256(`original ${hash}`),
    bytes: 4_182_331,
    mediaType: 'image/jpeg',
    role,
    takenAt: { local: `${on}T11:20:00`, offset: '-06:00' },
    receivedAt: `${on}T17:21:04.000Z`,
    caption,
    copy: { sha256: hash, bytes: bytes.length, mediaType: 'image/jpeg', removed: ['location', 'serial numbers'] },
  };
}

const terms: TermsBody = {
  schedule: [
    { item: 'engine-oil', title: 'Engine oil and filter', action: 'replace', interval: { distances: [{ amount: '5000', unit: '[mi_i]' }, { amount: '8000', unit: 'km' }], months: '12' }, firstService: { distances: [{ amount: '1000', unit: '[mi_i]' }] }, source: manual('112') },
    { item: 'primary', title: 'Primary chaincase fluid', action: 'replace', interval: { distances: [{ amount: '10000', unit: '[mi_i]' }] }, firstService: { distances: [{ amount: '1000', unit: '[mi_i]' }] }, source: manual('114') },
    { item: 'gearbox', title: 'Gearbox fluid', action: 'replace', interval: { distances: [{ amount: '20000', unit: '[mi_i]' }] }, firstService: { distances: [{ amount: '1000', unit: '[mi_i]' }] }, source: manual('116') },
    { item: 'brake-fluid', title: 'Brake and clutch fluid', action: 'replace', interval: { months: '24' }, source: practice },
  ],
  fluidPoints: [
    { point: 'engine', title: 'Engine', wetFill: [{ amount: '4.5', unit: '[qt_us]' }, { amount: '4.26', unit: 'L' }], grade: 'SAE 20W-50', standard: 'API SJ', levelPosition: 'upright', levelTemperature: 'hot', source: manual('113') },
    { point: 'primary', title: 'Primary chaincase', wetFill: [{ amount: '30', unit: '[foz_us]' }], dryFill: [{ amount: '34', unit: '[foz_us]' }], grade: 'SAE 75W-140', source: practice },
    { point: 'gearbox', title: 'Gearbox', wetFill: [{ amount: '28', unit: '[foz_us]' }], startWith: [{ amount: '27', unit: '[foz_us]' }], grade: 'SAE 75W-140', levelPosition: 'on the side stand', source: practice },
  ],
  fasteners: [{ fastener: 'engine-drain', title: 'Engine drain plug', bands: [{ min: '14', max: '21', unit: '[ft_i].[lbf_av]' }, { min: '19', max: '28.5', unit: 'N.m' }], source: manual('113') }],
  parts: [{ part: 'filter', title: 'Oil filter', partNumbers: ['TN-2204'], quantity: '1', source: manual('113') }],
  warranty: [{ term: 'factory', title: 'Factory warranty', kind: 'factory', startsOn: '2023-06-14', months: '36', distances: [{ amount: '36000', unit: '[mi_i]' }], source: manual('4') }],
}; // prettier-ignore

function token(at: string): TokenView {
  return {
    authority: 'demo.example test authority',
    genTime: at,
    isOwnAuthority: true,
    isIndependent: false,
    rootName: null,
    sha256: sha256(at),
  };
}

const log = (id: string, size: number): LogView => ({
  id,
  origin: 'demo.example',
  keyName: 'demo.example',
  timesInjected: true,
  size,
  root: createHash('sha256').update(id).digest('base64'),
  checkpoint: '',
  verifierKey: 'demo.example+1a2b3c4d+AQ9t5h0c6Q1k0mI2n1b7Jm2m6c5v3n8x0w4r7y9u1i2o',
  fingerprint: sha256('key').match(/.{4}/g)?.join(' ') ?? '',
});

const checks: Check[] = [
  { key: 'receipts', result: 'met', detail: 'Receipts R3 and R4 cover all of it.' },
  { key: 'bought-before-use', result: 'met', detail: 'Bought seven days before the work.' },
  { key: 'grade-and-part-number', result: 'met', detail: 'SAE 20W-50, as specified.' },
  { key: 'quantity', result: 'met', detail: '4.5 US qt of 4.5 US qt.' },
  { key: 'odometer-photographed', result: 'met', detail: 'Plate 3.' },
  { key: 'logged-soon', result: 'met', detail: 'Two hours after the work.' },
];

function purchase(
  seq: number,
  on: string,
  supplier: string,
  body: PurchaseBody['lines'],
  attachments: Attachment[],
  usedBy: number[],
): PurchaseView {
  const sealedAt = `${on}T18:02:11.120Z`;
  return {
    log: shelfLog, seq, leafHash: sha256(`shelf ${seq}`), sealedAt,
    body: { boughtOn: { date: on, time: '10:58', zone }, lines: body },
    supplier: { name: supplier, address: '14 Mill Lane, Brandywell' }, prices: null,
    author: { person: owner, name: 'Imke Vandersloot', role: 'owner' },
    attachments, tokens: [token(sealedAt)], usedBy, corrections: [],
  }; // prettier-ignore
}

const draw = (seq: number, line: number, product: string, on: string, amount: string, before: string, after: string): Draw => ({
  purchase: { log: shelfLog, seq, leafHash: sha256(`shelf ${seq}`) }, line, product, boughtOn: on,
  amount, unit: '[qt_us]', balanceBefore: { amount: before, unit: '[qt_us]' }, balanceAfter: { amount: after, unit: '[qt_us]' },
}); // prettier-ignore

const oilTask = (draws: Draw[]): Task => ({
  key: 'engine-oil', title: 'Engine oil and filter', scheduleItem: 'engine-oil', action: 'replace',
  steps: [{ key: 'open', title: 'Fill point opened first' }, { key: 'drain', title: 'Drained warm' }, { key: 'gasket', title: 'Filter gasket oiled, turned by hand' }],
  inspections: [{ subject: 'Magnet of the drain plug', grade: '1', note: 'As last time.' }],
  fills: [{ point: 'engine', pointTitle: 'Engine', fillKind: 'wet', product: 'Fernhill V-Twin', grade: 'SAE 20W-50', amounts: [{ amount: '4.25', unit: '[qt_us]', step: 'first' }, { amount: '0.25', unit: '[qt_us]', step: 'top-up' }], specification: [{ amount: '4.5', unit: '[qt_us]' }], draws }],
  torques: [{ fastener: 'engine-drain', fastenerTitle: 'Engine drain plug', amount: '20', unit: '[ft_i].[lbf_av]', specification: [{ min: '14', max: '21', unit: '[ft_i].[lbf_av]' }], tool: { name: 'Tarn 3/8 click wrench', calibratedOn: '2025-03-02' } }],
  parts: [{ name: 'Oil filter', partNumber: 'TN-2204', quantity: '1', draws: [] }, { name: 'O-ring', partNumber: 'TN-0117', quantity: '1', draws: [], uncovered: { amount: '1', unit: '{piece}' } }],
  levelChecks: [{ point: 'engine', pointTitle: 'Engine', position: 'upright', temperature: 'hot', reading: 'between the marks' }],
}); // prettier-ignore

const simpleTask = (key: string, title: string): Task => ({
  key, title, scheduleItem: key, action: 'replace', steps: [], inspections: [], torques: [], parts: [], levelChecks: [],
  fills: [{ point: key, pointTitle: title, fillKind: 'wet', product: 'Fernhill Gear', grade: 'SAE 75W-140', amounts: [{ amount: '30', unit: '[foz_us]', step: 'first' }], specification: [{ amount: '30', unit: '[foz_us]' }], draws: [] }],
}); // prettier-ignore

interface ServiceOptions {
  seq: number;
  on: string;
  at: string;
  title: string;
  tasks: Task[];
  sealedAt?: string;
  more?: Partial<EntryView>;
  statement?: string;
  moreChecks?: Check[];
}

function service({
  seq,
  on,
  at,
  title,
  tasks,
  sealedAt = `${on}T23:32:05.120Z`,
  more,
  statement = '',
  moreChecks = [],
}: ServiceOptions): EntryView {
  const body: ServiceBody = {
    termsSeq: 1, recorded: 'at-the-time', startedAt: { date: on, time: '13:40', zone }, finishedAt: { date: on, time: '15:53', zone },
    odometer: miles(at), performedBy: [{ person: owner, capacity: 'owner' }], title, tasks, checks: [...checks, ...moreChecks], statement,
  }; // prettier-ignore
  return { ...entry(seq, title, sealedAt), kind: 'service', body, ...more } as EntryView;
}

function entry(seq: number, title: string, sealedAt: string) {
  return {
    seq, title, sealedAt, leafHash: sha256(`leaf ${seq}`), previous: seq === 0 ? null : sha256(`leaf ${seq - 1}`), refersTo: null,
    author: { person: owner, name: 'Imke Vandersloot', role: 'owner' as const }, attachments: [], notes: null, withheld: [], erased: [], erasures: [],
    tokens: [token(sealedAt)], countersignatures: [], struckBy: null, addenda: [], stampsToCome: [], state: 'sealed' as const,
  }; // prettier-ignore
}

/** A record of three years with twelve photographs, every script, a long title, a struck entry, a late service. */
export async function packetFixture(): Promise<PacketContent> {
  const bytes = new Map<string, Buffer>();
  const receipt = (caption: string, on: string, lines: string[]) =>
    attach(bytes, 'receipt-front', caption, [on, ...lines], on);
  const oil = ['6 x FERNHILL 20W-50 1 QT', '1 x FILTER TN-2204', 'TOTAL 78.40', 'THANK YOU'];
  const purchases = [
    purchase(3, '2024-08-02', 'Halyard Cycle Works', [{ line: 1, product: 'Fernhill V-Twin', kind: 'fluid', grade: 'SAE 20W-50', standard: 'API SJ', containers: 6, containerSize: { amount: '1', unit: '[qt_us]' }, batch: 'F2407-11' }, { line: 2, product: 'Oil filter', kind: 'part', partNumber: 'TN-2204', quantity: '2' }], [await receipt('Receipt', '2024-08-02', oil), await attach(bytes, 'receipt-back', 'Back, with the rider’s note', ['For the Sorrel'], '2024-08-02')], [3]),
    purchase(4, '2025-10-12', 'Brandywell Powersports', [{ line: 1, product: 'Fernhill V-Twin', kind: 'fluid', grade: 'SAE 20W-50', containers: 5, containerSize: { amount: '1', unit: '[qt_us]' } }], [await receipt('Receipt', '2025-10-12', oil)], [5]),
  ]; // prettier-ignore
  const pdf: Attachment = { sha256: sha256('pdf'), bytes: 84_120, mediaType: 'application/pdf', role: 'document', receivedAt: '2025-10-19T22:40:00.000Z', caption: 'Recall notice, as sent' }; // prettier-ignore
  const photos = async (on: string, seq: number) => [
    await attach(bytes, 'odometer', `Odometer ${seq}`, ['10238 mi'], on),
    await attach(bytes, 'as-left', `Drain plug ${seq}`, ['Washer new'], on),
    await attach(bytes, 'magnet', `Magnet ${seq}`, ['fine grey fuzz'], on),
  ];
  const longTitle =
    'Engine oil, oil filter, primary chaincase fluid, gearbox fluid, brake pads front, brake fluid front and rear, clutch fluid, ' +
    'steering head check, belt tension and alignment, tyres looked at, battery terminals cleaned, throttle and clutch cables adjusted';
  const { greek, cyrillic, chinese, arabic, hebrew, emoji, thai } = wordsInEveryScript;
  const countersigned = '2025-10-24T16:10:00.000Z';
  const shop = {
    name: 'Halyard Cycle Works',
    address: '3 Quay Street, Brandywell',
    accountSince: '2024-05-01T09:00:00.000Z',
    confirmedBy: 'steward',
  };
  const countersignature = {
    capacity: 'inspected' as const,
    statement: 'Inspected the finished work.',
    shop,
    invitedBy: 'Imke Vandersloot',
  };
  const technician = {
    person: 'c0ffee00-0000-4000-8000-000000000001',
    name: 'Teodora Lindqvist',
    role: 'shop' as const,
  };
  const entries: EntryView[] = [
    { ...entry(0, 'Record opened', '2023-06-20T18:00:00.000Z'), kind: 'opening', body: { make: 'Corvane', model: 'Sorrel 1800', modelYear: '2022', kindOfMachine: 'big V-twin tourer', firstUse: { on: '2023-06-14', odometer: miles('4') }, recordStarts: { on: '2023-06-14', odometer: miles('4'), why: 'new' } } },
    { ...entry(1, 'Terms', '2023-06-20T18:05:00.000Z'), kind: 'terms', body: terms },
    service({ seq: 2, on: '2023-08-12', at: '980', title: 'First service: engine oil, primary and gearbox', tasks: [oilTask([]), simpleTask('primary', 'Primary chaincase'), simpleTask('gearbox', 'Gearbox')] }),
    service({ seq: 3, on: '2024-08-10', at: '5340', title: 'Engine oil and filter', tasks: [oilTask([draw(3, 1, 'Fernhill V-Twin', '2024-08-02', '4.5', '6', '1.5')])], sealedAt: '2024-08-29T20:00:00.000Z', moreChecks: [{ key: 'logged-soon', result: 'gap', detail: 'Sealed 19 days after the work.' }], more: { attachments: await photos('2024-08-10', 3) } }),
    service({ seq: 4, on: '2024-10-05', at: '5900', title: longTitle, tasks: [simpleTask('brake-fluid', 'Brake and clutch fluid')], statement: `${greek}. ${cyrillic}. ${chinese}. ${arabic} (4.25 L). ${hebrew}. ${emoji} ${thai}`, more: { struckBy: { seq: 7, sealedAt: '2025-11-02T10:00:00.000Z', reason: 'Logged on the wrong machine.' }, state: 'struck', notes: 'First line\nsecond line' } }),
    service({ seq: 5, on: '2025-10-19', at: '10238', title: 'Engine oil, primary and gearbox', tasks: [oilTask([draw(3, 1, 'Fernhill V-Twin', '2024-08-02', '1.5', '1.5', '0'), draw(4, 1, 'Fernhill V-Twin', '2025-10-12', '3', '5', '2')]), simpleTask('primary', 'Primary chaincase'), simpleTask('gearbox', 'Gearbox')], statement: arabic, moreChecks: [{ key: 'receipts', result: 'gap', detail: 'No receipt for the O-ring.' }], more: { attachments: [...(await photos('2025-10-19', 5)), pdf, ...(await photos('2025-10-20', 51))], state: 'countersigned', addenda: [8], countersignatures: [{ seq: 6, sealedAt: countersigned, author: technician, body: countersignature }] } }),
    { ...entry(6, 'Countersigned: inspected the finished work', countersigned), kind: 'countersignature', refersTo: { seq: 5, leafHash: sha256('leaf 5') }, author: technician, body: countersignature },
    { ...entry(7, 'Strike', '2025-11-02T10:00:00.000Z'), kind: 'strike', refersTo: { seq: 4, leafHash: sha256('leaf 4') }, body: { reason: 'Logged on the wrong machine.' } },
    { ...entry(8, 'Checked hot after the first ride', '2025-11-03T10:00:00.000Z'), kind: 'addendum', refersTo: { seq: 5, leafHash: sha256('leaf 5') }, state: 'waiting', tokens: [], body: { text: 'Level between the marks, no drips.' } },
    { ...entry(9, 'Odometer reading', '2026-04-10T10:00:00.000Z'), kind: 'reading', body: { on: '2026-04-10', odometer: miles('14360') } },
  ]; // prettier-ignore
  const record: RecordView = {
    machine: { id: 'm1', name: 'Sorrel', make: 'Corvane', model: 'Sorrel 1800', modelYear: '2022', kind: 'big V-twin tourer' },
    identity: { vin: 'AAACRVSR3NA000417', engineNumber: 'SR18-20417' },
    opening: { make: 'Corvane', model: 'Sorrel 1800', modelYear: '2022', kindOfMachine: 'big V-twin tourer', firstUse: { on: '2023-06-14', odometer: miles('4') }, recordStarts: { on: '2023-06-14', odometer: miles('4'), why: 'new' } },
    terms, termsBySeq: new Map([[1, terms]]), log: log(machineLog, entries.length), entries,
    shelves: [{ log: log(shelfLog, 6), purchases, size: 6, partsWithheld: 6 }],
  }; // prettier-ignore
  const files = new Map<string, PacketFile>();
  for (const [hash, { name, mediaType }] of nameFiles(record)) {
    const picture = bytes.get(hash);
    if (picture === undefined) continue;
    const source = { bytes: picture.length, open: () => Readable.from([picture]) };
    files.set(hash, { sha256: hash, name, mediaType, source, size: readJpegSize(picture) });
  }
  return {
    record, recordJson: JSON.stringify({ format: 'witnessmark/bundle/1', number: 'WM-7Q4K-0031' }), number: 'WM-7Q4K-0031',
    purpose: 'a warranty claim on the gearbox', madeAt: '2026-04-12T16:14:00.000Z', zone, owner: 'Imke Vandersloot', scope: usualScope,
    link: 'http://localhost:3000/v/Zk3mQ8rT1yUvWx5bC7dE9g', site: 'http://localhost:3000', files,
    signer: signerWith(newCertificate('demo.example')),
  }; // prettier-ignore
}
