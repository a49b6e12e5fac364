import 'server-only';
import { textPath, textWidth } from './draw-text';
import { numbersFrom } from './photograph';

export interface ReceiptDrawing {
  shop: string;
  address: string;
  /** `12 Oct 2025 11:20` */
  when: string;
  lines: { text: string; price: string }[];
  total: string;
  number: string;
  /** 0 fresh to 1 faded: thermal paper loses its print with heat, light and oil. */
  faded: number;
}

const width = 1050;
const height = 1400;
const paper = { width: 620, line: 42, size: 27, margin: 40 };

/** A till's thermal paper lying on a workbench, a little askew. */
export function receiptSvg(drawing: ReceiptDrawing): string {
  const random = numbersFrom(drawing.number);
  const ink = Math.round(40 + drawing.faded * 105);
  const rows = receiptRows(drawing);
  const length = rows.length * paper.line + 150;
  const scale = Math.min(1.42, (height - 120) / length);
  const tilt = (random() - 0.5) * 7;
  const crease = 0.3 + random() * 0.4;
  const body = rows.map((row, i) => rowPath(row, 92 + i * paper.line)).join('');
  const edge = Array.from({ length: 32 }, (_, i) => `L${(i + 1) * (paper.width / 32)} ${i % 2 === 0 ? 9 : 0}`).join('');
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}">
    <defs>
      <linearGradient id="light" x1="0" y1="0" x2="1" y2="1">
        <stop offset="0" stop-color="#fffdf2" stop-opacity=".35"/><stop offset=".55" stop-color="#808080" stop-opacity="0"/>
        <stop offset="1" stop-color="#000000" stop-opacity=".42"/></linearGradient>
      <filter id="soft"><feGaussianBlur stdDeviation="14"/></filter>
    </defs>
    ${bench(random)}
    <g transform="translate(${width / 2} ${height / 2}) rotate(${tilt.toFixed(2)}) scale(${scale.toFixed(3)})">
      <g transform="translate(${-paper.width / 2} ${-length / 2})">
        <rect x="10" y="16" width="${paper.width}" height="${length}" fill="#000" opacity=".55" filter="url(#soft)"/>
        <path d="M0 0${edge}V${length}H0Z" fill="#f3f1e9"/>
        <rect y="${length * crease}" width="${paper.width}" height="5" fill="#fff" opacity=".7"/>
        <rect y="${length * crease + 5}" width="${paper.width}" height="7" fill="#8c887c" opacity=".22"/>
        <g fill="rgb(${ink},${ink},${ink + 14})">${body}</g>
        <ellipse cx="${120 + random() * 380}" cy="${length * (0.55 + random() * 0.35)}" rx="58" ry="46" fill="#6d5524" opacity=".14"/>
      </g>
    </g>
    <rect width="${width}" height="${height}" fill="url(#light)"/>
  </svg>`;
}

/** The back of the same paper: blank but for what the rider wrote on it. */
export function receiptBackSvg(drawing: Pick<ReceiptDrawing, 'number'>, note: string[]): string {
  const random = numbersFrom(`${drawing.number} back`);
  const length = 900;
  const written = note
    .map(
      (line, i) =>
        `<g transform="skewX(-9)">${textPath({ text: line, x: 110, y: 300 + i * 74, size: 50, face: 'text' })}</g>`,
    )
    .join('');
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}">
    ${bench(random)}
    <g transform="translate(${width / 2} ${height / 2}) rotate(${((random() - 0.5) * 8).toFixed(2)})">
      <g transform="translate(${-paper.width / 2} ${-length / 2})">
        <rect x="10" y="16" width="${paper.width}" height="${length}" fill="#000" opacity=".4"/>
        <rect width="${paper.width}" height="${length}" fill="#efede4"/>
        <g fill="#1d3d78" opacity=".9">${written}</g>
      </g>
    </g>
  </svg>`;
}

type Row = { left: string; right?: string; centred?: boolean; size?: number } | 'rule' | 'gap';

function receiptRows(drawing: ReceiptDrawing): Row[] {
  return [
    { left: drawing.shop, centred: true, size: 34 },
    { left: drawing.address, centred: true, size: 23 },
    'gap',
    { left: drawing.when },
    { left: `Receipt ${drawing.number}` },
    'rule',
    ...drawing.lines.flatMap(({ text, price }): Row[] =>
      wrapped(text).map((left, i) => (i === 0 ? { left, right: price } : { left: `  ${left}` })),
    ),
    'rule',
    { left: 'TOTAL', right: drawing.total, size: 34 },
    { left: 'CARD', right: drawing.total },
    'gap',
    { left: 'Keep this receipt.', centred: true, size: 23 },
  ];
}

const mostCharacters = 25;

function wrapped(text: string): string[] {
  const rows: string[] = [];
  for (const word of text.split(' ')) {
    const last = rows.at(-1);
    if (last !== undefined && last.length + word.length < mostCharacters) rows[rows.length - 1] = `${last} ${word}`;
    else rows.push(word);
  }
  return rows;
}

function rowPath(row: Row, y: number): string {
  if (row === 'gap') return '';
  if (row === 'rule') {
    const dashes = '- '.repeat(17).trim();
    return textPath({ text: dashes, x: paper.margin, y, size: 25, face: 'mono' });
  }
  const size = row.size ?? paper.size;
  const room = paper.width - 2 * paper.margin;
  const fit = Math.min(size, (size * room) / Math.max(1, textWidth(row.left, size, 'mono')));
  const x = row.centred === true ? (paper.width - textWidth(row.left, fit, 'mono')) / 2 : paper.margin;
  const left = textPath({ text: row.left, x, y, size: row.right === undefined ? fit : size, face: 'mono' });
  if (row.right === undefined) return left;
  const end = paper.width - paper.margin - textWidth(row.right, size, 'mono');
  return left + textPath({ text: row.right, x: end, y, size, face: 'mono' });
}

/** A scratched steel bench. */
export function bench(random: () => number): string {
  const scratches = Array.from({ length: 46 }, () => {
    const [x, y, reach] = [random() * width, random() * height, 60 + random() * 260];
    const tone = random() > 0.5 ? '#ffffff' : '#000000';
    return `<path d="M${x.toFixed(0)} ${y.toFixed(0)}l${reach.toFixed(0)} ${(reach * (random() - 0.5) * 0.5).toFixed(0)}" stroke="${tone}" stroke-opacity="${(0.03 + random() * 0.09).toFixed(2)}" stroke-width="${(1 + random() * 2.5).toFixed(1)}"/>`;
  });
  const base = 52 + Math.floor(random() * 30);
  return `<rect width="${width}" height="${height}" fill="rgb(${base},${base + 6},${base + 8})"/>${scratches.join('')}`;
}
