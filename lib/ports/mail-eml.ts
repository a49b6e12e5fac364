export interface ReadMail {
  to: string;
  from: string;
  subject: string;
  date: string;
  text: string;
}

/** Reads a plain-text message (RFC 5322) with encoded words (RFC 2047) and a transfer encoding (RFC 2045). */
export function readEml(message: Buffer): ReadMail {
  const whole = message.toString('latin1').replaceAll('\r\n', '\n');
  const gap = whole.indexOf('\n\n');
  const head = gap < 0 ? whole : whole.slice(0, gap);
  const body = gap < 0 ? '' : whole.slice(gap + 2);
  const lines = head.replace(/\n[ \t]+/g, ' ').split('\n');
  const header = (name: string) => {
    const line = lines.find((candidate) => candidate.toLowerCase().startsWith(`${name}:`)) ?? '';
    return decodeWords(line.slice(name.length + 1).trim());
  };
  return {
    to: header('to'),
    from: header('from'),
    subject: header('subject'),
    date: header('date'),
    text: decodeBody(body, header('content-transfer-encoding').toLowerCase()),
  };
}

function decodeBody(body: string, encoding: string): string {
  if (encoding === 'base64') return Buffer.from(body, 'base64').toString('utf8');
  if (encoding === 'quoted-printable') return quotedPrintable(body.replace(/=\n/g, ''));
  return Buffer.from(body, 'latin1').toString('utf8');
}

function quotedPrintable(text: string): string {
  const bytes = text.replace(/=([0-9A-Fa-f]{2})/g, (_, hex: string) => String.fromCharCode(parseInt(hex, 16)));
  return Buffer.from(bytes, 'latin1').toString('utf8');
}

function decodeWords(value: string): string {
  return value
    .replace(/\?=\s+=\?/g, '?==?')
    .replace(/=\?utf-8\?([bq])\?([^?]*)\?=/gi, (_, encoding: string, text: string) =>
      encoding.toLowerCase() === 'b'
        ? Buffer.from(text, 'base64').toString('utf8')
        : quotedPrintable(text.replaceAll('_', ' ')),
    );
}
