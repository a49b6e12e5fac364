// `npm test`: installs what the tests need, builds once, and runs every suite.
import { spawnSync } from 'node:child_process';
import path from 'node:path';
import { buildOnce, installPackages, requireCommands, requireNode, root } from './prepare.mjs';

requireNode();
requireCommands(
  {
    chromium: 'chromium',
    pdftotext: 'poppler-utils',
    qpdf: 'qpdf',
    openssl: 'openssl',
    exiftool: 'libimage-exiftool-perl',
    zbarimg: 'zbar-tools',
    mutool: 'mupdf-tools',
    sqlite3: 'sqlite3',
    'heif-enc': 'libheif-examples',
    python3: 'python3',
    unzip: 'unzip',
  },
  'the tests ask outside programs to judge',
);
installPackages();
buildOnce();
const vitest = path.join(root, 'node_modules', 'vitest', 'vitest.mjs');
const { status } = spawnSync(process.execPath, [vitest, 'run', ...process.argv.slice(2)], {
  cwd: root,
  stdio: 'inherit',
});
process.exit(status ?? 1);
