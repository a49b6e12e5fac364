import 'server-only';
import { bench } from './draw-receipt';
import { textPath, textWidth } from './draw-text';
import { numbersFrom } from './photograph';

const width = 1200;
const height = 900;

const centred = (text: string, y: number, size: number, face: 'mono' | 'condensed' | 'text', at = width / 2) =>
  textPath({ text, x: at - textWidth(text, size, face) / 2, y, size, face });

/** The instrument of a tourer: a round dial with the odometer's window in it. */
export function odometerSvg(figure: string, unit: string, seed: string): string {
  const random = numbersFrom(`odometer ${seed}`);
  const tilt = (random() - 0.5) * 6;
  const ticks = Array.from({ length: 61 }, (_, i) => {
    const isLong = i % 5 === 0;
    return `<path transform="rotate(${-135 + i * 4.5})" d="M0 -318v${isLong ? 44 : 24}" stroke="#e9e6da" stroke-width="${isLong ? 7 : 3}"/>`;
  }).join('');
  const numbers = Array.from({ length: 7 }, (_, i) => {
    const angle = ((-225 + i * 45) * Math.PI) / 180;
    const label = String(i * 20);
    const [x, y] = [Math.cos(angle) * 232, Math.sin(angle) * 232];
    return textPath({
      text: label,
      x: x - textWidth(label, 50, 'condensed') / 2,
      y: y + 16,
      size: 50,
      face: 'condensed',
    });
  }).join('');
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}">
    <defs><radialGradient id="g"><stop offset="0" stop-color="#2a302f"/><stop offset="1" stop-color="#0c100f"/></radialGradient></defs>
    <rect width="${width}" height="${height}" fill="#1a2021"/>
    <path d="M0 760Q600 610 1200 760V900H0Z" fill="#3b4446"/>
    <g transform="translate(${600 + random() * 30 - 15} ${440 + random() * 24 - 12}) rotate(${tilt.toFixed(2)})">
      <circle r="396" fill="#8f9896"/><circle r="378" fill="#dfe3e0"/><circle r="352" fill="url(#g)"/>
      ${ticks}<g fill="#e9e6da">${numbers}</g>
      <path transform="rotate(-135)" d="M-7 40L0 -300L7 40Z" fill="#d35a3c"/><circle r="34" fill="#39423f"/>
      <rect x="-190" y="112" width="380" height="104" fill="#a9b59a" stroke="#050707" stroke-width="8"/>
      <g fill="#131a14">${centred(`${figure} ${unit}`, 188, 70, 'mono', 0)}</g>
    </g>
    <path d="M210 70Q470 -20 700 110L420 760Q230 560 210 70Z" fill="#fff" opacity=".07"/>
  </svg>`;
}

/** A drain plug with its magnet, held over a rag. `grade` 0 to 2. */
export function magnetSvg(grade: number, seed: string): string {
  const random = numbersFrom(`magnet ${seed}`);
  const fuzz = Array.from({ length: grade * 240 }, () => {
    const angle = random() * Math.PI * 2;
    const reach = Math.sqrt(random()) * (70 + grade * 16);
    return `<path d="M${(Math.cos(angle) * reach).toFixed(0)} ${(Math.sin(angle) * reach).toFixed(0)}l${(random() * 16 - 8).toFixed(0)} ${(random() * 16 - 8).toFixed(0)}" stroke="#24282a" stroke-opacity=".6" stroke-width="4"/>`;
  }).join('');
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}">
    <g transform="scale(1.15)">${bench(random)}</g>
    <path d="M60 120Q560 20 1120 150Q1180 500 1090 840Q560 900 110 790Q20 460 60 120Z" fill="#a43b33"/>
    <path d="M160 240Q600 160 1040 280M130 520Q600 420 1080 560M180 720Q620 640 1020 740" stroke="#7f2b26" stroke-width="14" fill="none"/>
    <g transform="translate(${590 + random() * 40} ${450 + random() * 30}) rotate(${random() * 50})">
      <circle cx="16" cy="22" r="236" fill="#000" opacity=".35"/>
      <circle r="230" fill="#8b9391"/><circle r="206" fill="#b9c0bd"/>
      ${Array.from({ length: 9 }, (_, i) => `<circle r="${196 - i * 10}" fill="none" stroke="#6f7775" stroke-width="3"/>`).join('')}
      <circle r="98" fill="#4c5352"/><circle r="84" fill="#767e7b"/>${fuzz}
    </g>
  </svg>`;
}

/** A torqued plug with its stripe of lacquer over head and case. */
export function plugSvg(seed: string): string {
  const random = numbersFrom(`plug ${seed}`);
  const turn = random() * 60;
  const fins = Array.from(
    { length: 7 },
    (_, i) => `<rect y="${i * 132}" width="${width}" height="84" fill="#9aa2a0" opacity="${0.55 + (i % 2) * 0.2}"/>`,
  ).join('');
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}">
    <rect width="${width}" height="${height}" fill="#5d6664"/>${fins}
    <g transform="translate(600 450)">
      <circle cx="14" cy="20" r="262" fill="#000" opacity=".35"/>
      <circle r="258" fill="#c3c9c6"/><circle r="242" fill="#adb5b2"/>
      <path transform="rotate(${turn.toFixed(1)})" d="M0 -170L147 -85V85L0 170L-147 85V-85Z" fill="#d9dedb" stroke="#3c4443" stroke-width="10"/>
      <path transform="rotate(${(turn + 33).toFixed(1)})" d="M-24 -300Q-6 0 -20 310H26Q12 0 22 -300Z" fill="#c9e83f" opacity=".94"/>
    </g>
  </svg>`;
}

/** A part on the bench beside its box, the number readable. */
export function partSvg(name: string, number: string, seed: string): string {
  const random = numbersFrom(`part ${seed}`);
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}">
    <g transform="scale(1.15)">${bench(random)}</g>
    <g transform="translate(600 450) rotate(${((random() - 0.5) * 10).toFixed(1)})">
      <rect x="-395" y="-215" width="820" height="470" fill="#000" opacity=".35"/>
      <rect x="-410" y="-235" width="820" height="470" fill="#d8c39a"/><rect x="-410" y="-235" width="820" height="96" fill="#23413e"/>
      <g fill="#f4efe0">${centred('TARN', -166, 72, 'condensed', 0)}</g>
      <g fill="#2b2418">${centred(name, -20, 62, 'condensed', 0)}${centred(number, 88, 78, 'mono', 0)}</g>
      ${Array.from({ length: 34 }, (_, i) => `<rect x="${-230 + i * 14}" y="136" width="${3 + Math.floor(random() * 9)}" height="64" fill="#2b2418"/>`).join('')}
    </g>
  </svg>`;
}
