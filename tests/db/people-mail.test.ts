import { readdirSync, readFileSync, statSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, test } from 'vitest';
import { env } from '@/lib/env';
import { composeMail, sendMail } from '@/lib/ports/mail';
import { readEml } from '@/lib/ports/mail-eml';
import { keepMail, mailFolder, mailNames, readKeptMail } from '@/lib/ports/mail-folder';
import { listMail, readMail } from '@/lib/services/list-mail';

const mail = { to: 'imke@post.example', subject: 'Confirm your address', text: 'Open this link.\n' };

describe('a mail goes to exactly one address', () => {
  test.each([
    ['a second address after a comma', 'imke@post.example,joost@post.example'],
    ['a second address after a semicolon', 'imke@post.example;joost@post.example'],
    ['a header after a line break', 'imke@post.example\r\nBcc: joost@post.example'],
    ['a header after a bare line feed', 'imke@post.example\nBcc: joost@post.example'],
    ['a display name', 'Imke <imke@post.example>'],
    ['a quoted local part', '"imke joost"@post.example'],
    ['a space', 'imke @post.example'],
    ['a group', 'riders:imke@post.example;'],
    ['no host', 'imke@'],
    ['nothing', ''],
  ])('%s is refused', async (_what, to) => {
    const before = (await mailNames()).length;
    await expect(sendMail({ ...mail, to })).rejects.toMatchObject({ code: 'invalid-input' });
    expect((await mailNames()).length).toBe(before);
  });

  test.each([
    ['carriage return and line feed', 'Confirm\r\nBcc: joost@post.example'],
    ['line feed', 'Confirm\nBcc: joost@post.example'],
    ['carriage return', 'Confirm\rBcc: joost@post.example'],
    ['null', 'Confirm\0'],
    ['line separator', 'Confirm\u2028Bcc: joost@post.example'],
    ['nothing at all', ''],
  ])('a subject with %s is refused', (_what, subject) => {
    expect(() => composeMail({ ...mail, subject })).toThrow('one line');
  });

  test('a subject has up to 200 characters', () => {
    const fits = (length: number) => {
      try {
        composeMail({ ...mail, subject: 'a'.repeat(length) });
        return true;
      } catch {
        return false;
      }
    };
    expect([199, 200, 201].map(fits)).toEqual([true, true, false]);
  });
});

describe('a mail that is not sent', () => {
  test('is kept as a whole file with its lines as they were', async () => {
    await sendMail(mail);
    const [name = ''] = await mailNames();
    const raw = readFileSync(path.join(mailFolder(), name), 'utf8');
    expect(raw).toMatch(/^To: imke@post\.example$/m);
    expect(raw).toMatch(/^From: Witnessmark <steward@witnessmark\.example>$/m);
    expect(raw).toMatch(/^Auto-Submitted: auto-generated$/m);
    expect(raw).not.toMatch(/^(Bcc|Cc):/m);
    expect(await readKeptMail(name)).toMatchObject({ to: mail.to, subject: mail.subject, text: mail.text });
    expect(statSync(path.join(mailFolder(), name)).mode & 0o777).toBe(0o600);
    expect(readdirSync(mailFolder()).filter((file) => file.endsWith('.part'))).toEqual([]);
  });

  test('reads back every character of subject and text, long lines and blank ones too', async () => {
    const text = `Größe: ½ L, 里程 12 000 km\n\n.\nFrom here: ${'word '.repeat(60)}=3D= https://demo.example/x/${'a'.repeat(90)}\n`;
    const subject = 'Nach dem Ölwechsel: prüfen Sie 里程 und unterschreiben Sie den Eintrag mit dem Datum von heute';
    await sendMail({ to: mail.to, subject, text });
    const [name = ''] = await mailNames();
    expect(await readMail({ name })).toMatchObject({ subject, text });
  });

  test('is listed with the newest first, a page at a time', async () => {
    const start = Date.parse('2099-01-01T00:00:00.000Z');
    for (let n = 0; n < 5; n += 1) {
      await keepMail(Buffer.from(`To: a@b.example\nSubject: number ${n}\n\nText\n`), new Date(start + n * 1000));
    }
    const first = await listMail({ page: 1, perPage: 2 });
    const second = await listMail({ page: 2, perPage: 2 });
    expect(first.lines.map(({ subject }) => subject)).toEqual(['number 4', 'number 3']);
    expect(second.lines.map(({ subject }) => subject)).toEqual(['number 2', 'number 1']);
    expect(first.lines[0]?.at).toBe('2099-01-01T00:00:04.000Z');
    expect(first.total).toBeGreaterThanOrEqual(5);
    expect(first.isSmtp).toBe(env.smtp !== undefined);
  });

  test.each([
    '../keys/session.key',
    '..%2Fkeys%2Fsession.key',
    '/etc/hostname',
    '.20990101T000000000Z-00000000.eml.part',
    '',
  ])('the name %s reaches no file', async (name) => {
    await expect(readMail({ name })).rejects.toMatchObject({ code: 'not-found' });
  });
});

test('a message with folded headers, encoded words and base64 is read as its standards say (RFC 5322, 2047, 2045)', () => {
  const text = Buffer.from('Schön, danke.\n').toString('base64');
  const message = `To: a@b.example\r\nSubject: =?UTF-8?Q?Sch=C3=B6n?=\r\n =?utf-8?B?LCBkYW5rZQ==?=\r\nContent-Transfer-Encoding: base64\r\n\r\n${text}\r\n`;
  expect(readEml(Buffer.from(message))).toMatchObject({ subject: 'Schön, danke', text: 'Schön, danke.\n' });
});
