import { readFile } from 'node:fs/promises';
import path from 'node:path';
import { transform } from 'esbuild';
import { compile } from 'tailwindcss';

/** Faces that are put into the page; the other weights are made of these, and hashes take the reader's own face. */
const faces = [
  { family: 'Barlow', file: 'Barlow_400Regular.ttf', weight: 400 },
  { family: 'Barlow Condensed', file: 'BarlowCondensed_600SemiBold.ttf', weight: 600 },
];

/**
 * The page's style sheet, from the same tokens as every screen: what Tailwind makes of the classes that these sources
 * name, and the faces.
 */
export async function verifyPageStyles(root: string, sources: string[]): Promise<string> {
  const sheet = await readFile(path.join(root, 'app/globals.css'), 'utf8');
  const compiler = await compile(sheet.replace(/^@source .*$/gm, ''), {
    base: root,
    loadStylesheet: async (id, base) => {
      const file = path.join(root, 'node_modules', id === 'tailwindcss' ? 'tailwindcss/index.css' : id);
      return { path: file, base, content: await readFile(file, 'utf8') };
    },
  });
  // Whatever stands between blanks and quotes may be a class; what is none is left out by the compiler.
  const candidates = new Set<string>();
  for (const file of [...sources].sort()) {
    for (const word of (await readFile(path.join(root, file), 'utf8')).split(/[\s"'`]+/)) candidates.add(word);
  }
  const css = compiler.build([...candidates].sort());
  const { code } = await transform((await fontFaces(root)) + css, { loader: 'css', minify: true, charset: 'utf8' });
  return code.trim();
}

async function fontFaces(root: string): Promise<string> {
  const rules = faces.map(async ({ family, file, weight }) => {
    const base64 = (await readFile(path.join(root, 'fonts', file))).toString('base64');
    return `@font-face{font-family:"${family}";font-weight:${weight};src:url(data:font/ttf;base64,${base64}) format("truetype")}`;
  });
  // The names under which the served pages' own build hands in the same faces.
  const names =
    ":root{--font-barlow:'Barlow';--font-barlow-condensed:'Barlow Condensed';--font-spline-mono:ui-monospace}";
  return [...(await Promise.all(rules)), names].join('\n');
}
