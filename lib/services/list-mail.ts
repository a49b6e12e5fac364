import 'server-only';
import { env } from '@/lib/env';
import { notFound } from '@/lib/errors';
import type { ReadMail } from '@/lib/ports/mail-eml';
import { mailNames, readKeptMail } from '@/lib/ports/mail-folder';

export interface MailLine {
  name: string;
  to: string;
  subject: string;
  /** When the file was written, from its name. */
  at: string;
}

/** The instant in a caught mail's file name. */
export function mailInstant(name: string): string {
  return name.replace(/^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)(\d{3})Z-.*$/, '$1-$2-$3T$4:$5:$6.$7Z');
}

/** One page of the caught mails, the newest first. Only the files of that page are read. */
export async function listMail({ page, perPage }: { page: number; perPage: number }) {
  const names = await mailNames();
  const shown = names.slice((page - 1) * perPage, page * perPage);
  const read = await Promise.all(shown.map(async (name) => ({ name, mail: await readKeptMail(name) })));
  const lines = read.flatMap(({ name, mail }): MailLine[] =>
    mail === null ? [] : [{ name, to: mail.to, subject: mail.subject, at: mailInstant(name) }],
  );
  return { lines, total: names.length, isSmtp: env.smtp !== undefined };
}

export async function readMail({ name }: { name: string }): Promise<ReadMail & { at: string }> {
  const mail = await readKeptMail(name);
  if (mail === null) throw notFound('mail');
  return { ...mail, at: mailInstant(name) };
}
