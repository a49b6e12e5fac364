import fc from 'fast-check';
import { PDFArray, PDFDict, PDFDocument, PDFHexString, PDFName, PDFString } from 'pdf-lib';
import { describe, expect, it } from 'vitest';
import { joinBytes, utf8 } from '@/lib/evidence/bytes';
import { extractFromPacket, readContainer } from '@/lib/evidence/container';
import { verifyBundle } from '@/lib/evidence/verify';
import { buildZip } from './build-zip';
import { buildRecord, givenFiles, installation, keyOf, receiptBytes, signedText, unsignedBundle } from './build-record';

const text = signedText(unsignedBundle(buildRecord()));

async function packet(
  names: string[] = ['record.json', 'receipt.jpg', 'oil.jpg'],
  change: (document: PDFDocument) => void | Promise<void> = () => undefined,
  useObjectStreams = true,
): Promise<Uint8Array> {
  const document = await PDFDocument.create();
  document.addPage();
  for (const name of names) {
    const bytes = givenFiles.find((file) => file.name === name)?.bytes ?? utf8(text);
    await document.attach(bytes, name, { mimeType: name.endsWith('.jpg') ? 'image/jpeg' : 'application/json' });
  }
  await document.flush();
  await change(document);
  return document.save({ useObjectStreams });
}
const reason = async (bytes: Uint8Array): Promise<string> => {
  try {
    await readContainer(bytes);
  } catch (error) {
    expect(error).toMatchObject({ code: 'unreadable' });
    return (error as Error).message;
  }
  return 'readable';
};
/** A file specification with one embedded file, as an object of its own. */
function specification(document: PDFDocument, name: string, content = 'other') {
  const stream = document.context.register(document.context.flateStream(utf8(content), { Type: 'EmbeddedFile' }));
  return document.context.register(
    document.context.obj({
      Type: 'Filespec',
      F: PDFString.of(name),
      UF: PDFHexString.fromText(name),
      EF: { F: stream },
    }),
  );
}

describe('a packet', () => {
  it.each([true, false])('gives its record and its other files (object streams: %s)', async (useObjectStreams) => {
    const container = await readContainer(await packet(undefined, undefined, useObjectStreams));
    expect(container).toMatchObject({ kind: 'packet', bundleText: text });
    expect(container.files).toEqual([{ name: 'receipt.jpg', bytes: receiptBytes }, givenFiles[1]]);
    const { bundleText, files, pages } = container;
    expect(pages).toEqual({ state: 'none' });
    const finding = verifyBundle({
      bundleText,
      ...(files && { files }),
      key: keyOf(installation),
      ...(pages && { pages }),
    });
    expect(finding.alterations).toEqual([]);
    expect(finding.outcome).toBe('unchanged');
  });

  it('may carry a PDF among its files, whose own end does not count', async () => {
    const inner = await packet(['record.json']);
    const bytes = await packet(['record.json'], async (document) => {
      const stream = document.context.stream(inner, { Type: 'EmbeddedFile' });
      const file = document.context.obj({ F: PDFString.of('inner.pdf'), EF: { F: document.context.register(stream) } });
      document.catalog.set(PDFName.of('AF'), document.context.obj([document.context.register(file)]));
    });
    expect((await extractFromPacket(bytes)).files.map((file) => file.name)).toEqual(['inner.pdf']);
  });
});

describe('a PDF is unreadable as a packet', () => {
  it('without a record', async () => {
    expect(await reason(await packet(['receipt.jpg']))).toContain('no record.json');
  });

  it('with two records in its tree of names', async () => {
    expect(await reason(await packet(['record.json', 'record.json']))).toContain('2 files called record.json');
  });

  it('with a second record in other letters', async () => {
    expect(await reason(await packet(['record.json', 'RECORD.JSON']))).toContain('2 files called record.json');
  });

  it('with a second record among the associated files', async () => {
    const bytes = await packet(['record.json'], (document) => {
      document.catalog.set(PDFName.of('AF'), document.context.obj([specification(document, 'record.json')]));
    });
    expect(await reason(bytes)).toContain('2 files called record.json');
  });

  it('with a second record in an annotation', async () => {
    const bytes = await packet(['record.json'], (document) => {
      const annotation = {
        Type: 'Annot',
        Subtype: 'FileAttachment',
        Rect: [0, 0, 9, 9],
        FS: specification(document, 'record.json'),
      };
      document.getPage(0).node.set(PDFName.of('Annots'), document.context.obj([document.context.obj(annotation)]));
    });
    expect(await reason(bytes)).toContain('2 files called record.json');
  });

  it('with a second record that only its own object names', async () => {
    const bytes = await packet(['record.json'], (document) => void specification(document, 'record.json'));
    expect(await reason(bytes)).toContain('2 files called record.json');
  });

  it('with an attachment that nothing names', async () => {
    const bytes = await packet(['record.json'], (document) => {
      document.context.register(document.context.flateStream(utf8(text), { Type: 'EmbeddedFile' }));
    });
    expect(await reason(bytes)).toContain('nothing in it names');
  });

  it('with one file under two names', async () => {
    const bytes = await packet(['record.json'], (document) => {
      const file = document.context.lookup(specification(document, 'record.txt'), PDFDict);
      file.set(PDFName.of('UF'), PDFHexString.fromText('record.json'));
    });
    expect(await reason(bytes)).toContain('2 names');
  });

  it('with another name in the tree than in the file itself', async () => {
    const bytes = await packet(['record.json'], (document) => {
      const names = document.catalog.lookup(PDFName.of('Names'), PDFDict).lookup(PDFName.of('EmbeddedFiles'), PDFDict);
      names.lookup(PDFName.of('Names'), PDFArray).set(0, PDFHexString.fromText('notes.txt'));
    });
    expect(await reason(bytes)).toContain('2 names');
  });

  it('with two embedded files under one name', async () => {
    const bytes = await packet(['record.json'], (document) => {
      const streams = ['a', 'b'].map((content) =>
        document.context.register(document.context.flateStream(utf8(content), { Type: 'EmbeddedFile' })),
      );
      const [first, second] = streams;
      document.context.register(
        document.context.obj({ Type: 'Filespec', F: PDFString.of('x'), EF: { F: first, UF: second } }),
      );
    });
    expect(await reason(bytes)).toContain('two files under one name');
  });

  it('with something behind its end', async () => {
    const good = await packet();
    expect(await reason(joinBytes(good, utf8('\n')))).toBe('readable');
    expect(await reason(joinBytes(good, utf8('\n\n')))).toContain('behind the end');
    expect(await reason(joinBytes(good, utf8(' ')))).toContain('behind the end');
    expect(await reason(joinBytes(good, utf8('\n% more')))).toContain('behind the end');
    expect(await reason(good.slice(0, -1))).toContain('behind the end');
  });

  it('with a second revision, in either form of the table', async () => {
    for (const useObjectStreams of [true, false]) {
      const good = await packet(undefined, undefined, useObjectStreams);
      const start = good.length;
      const added = `\n999 0 obj\n<< /Added true >>\nendobj\nxref\n999 1\n${String(start + 1).padStart(10, '0')} 00000 n \ntrailer\n<< /Size 1000 /Prev 9 >>\nstartxref\n${start + 44}\n%%EOF`;
      expect(await reason(joinBytes(good, utf8(added)))).toContain('several revisions');
    }
  });

  it('with an earlier table named at its end, even when its first end was taken out', async () => {
    const good = Buffer.from(await packet(undefined, undefined, false)).toString('latin1');
    expect(await reason(Buffer.from(good.replace('trailer\n<<', 'trailer\n<< /Prev 9'), 'latin1'))).toContain(
      'earlier one',
    );
    expect(await reason(Buffer.from(good.replace('trailer\n<<', 'trailer\n<< /P#72ev 9'), 'latin1'))).toContain(
      'earlier one',
    );
    expect(await reason(Buffer.from(good.replace(/startxref\n\d+/, 'startxref\n9'), 'latin1'))).toContain('no table');
  });

  it('with the same object twice', async () => {
    const good = Buffer.from(await packet(undefined, undefined, false)).toString('latin1');
    const object = /\n(\d+ 0 obj\n[^]*?endobj\n)/.exec(good)?.[1] ?? '';
    const doubled = good.replace('xref\n', `${object}xref\n`).replace(/startxref\n(\d+)/, (_, offset: string) => {
      return `startxref\n${Number(offset) + object.length}`;
    });
    expect(await reason(Buffer.from(doubled, 'latin1'))).toContain('same object twice');
  });

  it('when it is encrypted', async () => {
    const good = Buffer.from(await packet(undefined, undefined, false)).toString('latin1');
    expect(await reason(Buffer.from(good.replace('trailer\n<<', 'trailer\n<< /Encrypt 1 0 R'), 'latin1'))).toContain(
      'encrypted',
    );
  });

  it('when it is only the beginning of one', async () => {
    expect(await reason(utf8('%PDF-1.7\n%%EOF'))).toContain('PDF');
    expect(await reason(utf8('%PDF-'))).toContain('behind the end');
  });
});

describe('an export', () => {
  const record = { name: 'record.json', bytes: utf8(text) };
  const readme = { name: 'README.txt', bytes: utf8('What this is') };

  it('gives its record and its other files, with those for people marked', async () => {
    const zip = buildZip([record, { ...readme, isDeflated: true }, ...givenFiles]);
    const { kind, bundleText, files } = await readContainer(zip);
    expect([kind, bundleText]).toEqual(['export', text]);
    expect(files).toEqual([{ ...readme, isCompanion: true }, ...givenFiles]);
    const finding = verifyBundle({ bundleText, ...(files && { files }), key: keyOf(installation) });
    expect(finding).toMatchObject({ outcome: 'unchanged', alterations: [], pages: 'none' });
    expect(finding.notChecked.join()).toMatch(/^README\.txt: .*no part of the record/);
  });

  it.each([
    ['a file that no entry names', { name: 'more.txt', bytes: utf8('more') }, 'file-unbound'],
    ['a file for people that lies deeper', { name: 'copies/README.txt', bytes: utf8('more') }, 'file-unbound'],
    ['a file for people in other letters', { name: 'readme.txt', bytes: utf8('more') }, 'file-unbound'],
    ['another file under a listed name', { name: 'oil.jpg', bytes: utf8('another') }, 'file-changed'],
  ])('is altered with %s', async (_, file, code) => {
    const { bundleText, files = [] } = await readContainer(buildZip([record, file]));
    expect(verifyBundle({ bundleText, files, key: keyOf(installation) })).toMatchObject({
      outcome: 'altered',
      alterations: [{ code }],
    });
  });

  it('is unreadable without a record, with two, or with one that lies deeper', async () => {
    expect(await reason(buildZip([readme]))).toContain('holds no record.json');
    for (const name of ['a/record.json', 'RECORD.JSON ', 'old-Record.json', 'copies/ｒecord.json']) {
      expect(await reason(buildZip([record, { ...record, name }]))).toMatch(/2 files whose names end|plain path/);
    }
    expect(await reason(buildZip([{ ...record, name: 'export/record.json' }]))).toContain('not the folder around');
    expect(await reason(buildZip([{ ...record, name: 'Record.json' }]))).toContain('is called “Record.json”');
  });

  it('is unreadable when its record is no text, or the file only begins as a ZIP', async () => {
    expect(await reason(buildZip([{ ...record, bytes: Uint8Array.of(0xff, 0xfe) }]))).toContain('not text');
    expect(await reason(utf8('PK\u0003\u0004'))).toContain('ZIP');
  });
});

describe('anything else', () => {
  it('is taken for a bare record when it is text', async () => {
    expect(await readContainer(utf8(text))).toEqual({ kind: 'record', bundleText: text, files: undefined });
  });

  it('is unreadable when it is no text', async () => {
    expect(await reason(new Uint8Array([0xff, 0xfe]))).toContain('not text');
  });

  it('never makes it fail in another way', async () => {
    const good = await packet(['record.json']);
    await fc.assert(
      fc.asyncProperty(fc.nat(good.length - 1), fc.nat(255), async (at, byte) => {
        const changed = Uint8Array.from(good);
        changed[at] = byte;
        try {
          const { bundleText } = await readContainer(changed);
          expect(typeof bundleText).toBe('string');
        } catch (error) {
          expect(error).toMatchObject({ code: 'unreadable' });
        }
      }),
    );
  });
});
