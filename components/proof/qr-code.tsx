'use client';

import { create } from 'qrcode';

export interface QrCodeProps {
  text: string;
  /** What scanning it does. */
  title: string;
}

/** ISO/IEC 18004 asks for a quiet zone of four modules around the symbol. */
const quietModules = 4;

/** A QR code as one path; black on white in both themes, or cameras would not read it. */
export function QrCode({ text, title }: QrCodeProps) {
  const { modules } = create(text, { errorCorrectionLevel: 'M' });
  const size = modules.size + 2 * quietModules;
  const dark = Array.from(modules.data).flatMap((isDark, index) => {
    if (!isDark) return [];
    const [x, y] = [index % modules.size, Math.floor(index / modules.size)];
    return [`M${x + quietModules} ${y + quietModules}h1v1h-1z`];
  });
  return (
    <svg
      role="img"
      aria-label={title}
      viewBox={`0 0 ${size} ${size}`}
      width={176}
      height={176}
      shapeRendering="crispEdges"
      className="border border-line"
    >
      <rect width={size} height={size} fill="#ffffff" />
      <path d={dark.join('')} fill="#000000" />
    </svg>
  );
}
