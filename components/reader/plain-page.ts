import { randomBytes } from 'node:crypto';
import { paths } from '@/lib/paths';

export interface PlainPage {
  status: number;
  title: string;
  /** Each a paragraph. */
  sentences: string[];
  /** The one that the proxy put into the page's policy; routes under /api have none and get one of their own. */
  nonce?: string | undefined;
}

/**
 * A page with a status that Next's own pages cannot have, such as 410. It needs no script and no account; the colours
 * are those of the style sheet, which such an answer cannot load.
 */
export function plainPage({ status, title, sentences, nonce: given }: PlainPage): Response {
  const nonce = given ?? randomBytes(16).toString('base64');
  const html = `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="robots" content="noindex">
<title>${escaped(title)} · Witnessmark</title>
<style nonce="${escaped(nonce)}">${style}</style>
</head>
<body>
<header><a href="${paths.home}">Witnessmark</a></header>
<main>
<h1>${escaped(title)}</h1>
${sentences.map((sentence) => `<p>${escaped(sentence)}</p>`).join('\n')}
</main>
</body>
</html>
`;
  const headers = new Headers({
    'content-type': 'text/html; charset=utf-8',
    'cache-control': 'private, no-store',
    'referrer-policy': 'no-referrer',
    'x-robots-tag': 'noindex',
    'x-content-type-options': 'nosniff',
  });
  if (given === undefined) {
    headers.set(
      'content-security-policy',
      `default-src 'none'; style-src 'nonce-${nonce}'; base-uri 'none'; form-action 'none'; frame-ancestors 'none'`,
    );
  }
  return new Response(html, { status, headers });
}

const style = `
:root { color-scheme: light dark; background: light-dark(#eff2ea, #0f1615); color: light-dark(#15211f, #e7eee9); font: 1.0625rem/1.45 Barlow, system-ui, sans-serif; }
body { margin: 0; }
header { background: light-dark(#0d4f4c, #0b2c2a); }
header a { display: inline-block; padding: .85rem 1rem; color: #f4fbf3; font-weight: 600; font-size: 1.25rem; text-decoration: none; }
header a:focus-visible { outline: 3px solid #eff2ea; outline-offset: -4px; }
main { max-width: 36rem; margin: 0 auto; padding: 2.5rem 1rem 4rem; }
h1 { font: 600 2rem/1.12 'Barlow Condensed', 'Arial Narrow', sans-serif; margin: 0 0 1rem; }
p { margin: 0 0 .75rem; }
`;

function escaped(text: string): string {
  return text.replace(/[&<>"']/g, (character) => `&#${character.charCodeAt(0)};`);
}
