import 'server-only';
import { machineById } from '@/db/queries/machines';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { formatLocalDate, localDateOf } from '@/lib/domain/instants';
import { defaultStatement } from '@/lib/domain/service-body';
import type { ScopeLine } from '@/lib/domain/scope';
import type { OpenableLine, OpenablePurchase } from '@/lib/domain/scope-effect';
import { notFound } from '@/lib/errors';
import type { TermsBody } from '@/lib/evidence/format';
import { entryTitle } from './entry-title';
import { openInScope } from './open-in-scope';
import { attachmentsOf, notesOf, type OpenedEntry } from './open-stored-log';
import { saidOfPurchases } from './purchase-view';
import { scopeLine } from './scope-line';

/** What a rider chooses from when they decide what a packet or a link opens. */
export interface Openable {
  lines: (OpenableLine & { title: string; on: string })[];
  purchases: OpenablePurchase[];
  /** Schedule items that some service did, by their newest title. */
  items: { item: string; title: string }[];
}

/** Everything of a record that can be opened or kept closed, for its owner. */
export async function whatCanBeOpened(options: { person: PersonRow; machineId: string }): Promise<Openable> {
  const { person, machineId } = options;
  await authorise({ person, action: 'share', machine: machineId });
  const row = await machineById(machineId);
  if (row === null) throw notFound('machine');
  const { machine, shelves, lines, spelledOut } = await openInScope({ machineId, scope: { closed: [] } });
  const openable = machine.entries.map((entry, index) => {
    const line = withContent(lines[index] ?? scopeLine(entry, spelledOut), entry);
    const on = line.finishedOn ?? localDateOf(entry.leaf.sealedAt, row.timeZone);
    return { ...line, title: entryTitle(entry), on: formatLocalDate(on) };
  });
  const lineOf = (entry: OpenedEntry) => withContent(scopeLine(entry, spelledOut), entry);
  const purchases = shelves.flatMap(({ entries, usedBy }) => {
    const said = saidOfPurchases(entries);
    return entries.flatMap((entry): OpenablePurchase[] => {
      const seqs = entry.kind === 'purchase' ? usedBy.get(entry.leaf.seq) : undefined;
      if (seqs === undefined) return [];
      const saidOfIt = said.get(entry.leaf.seq)?.map(lineOf);
      return [{ line: lineOf(entry), usedBy: seqs, ...(saidOfIt === undefined ? {} : { saidOfIt }) }];
    });
  });
  const titles = titlesOf(machine.entries);
  const items = [...new Set(openable.flatMap((line) => line.items))];
  return { lines: openable, purchases, items: items.map((item) => ({ item, title: titles.get(item) ?? item })) };
}

function withContent(line: ScopeLine, entry: OpenedEntry): OpenableLine {
  const { statement, text, reason, why } = (entry.values.get('body') ?? {}) as Record<string, unknown>;
  const texts = [statement, text, reason, why, notesOf(entry)].filter(
    (one) => typeof one === 'string' && one !== '' && one !== defaultStatement,
  );
  return { ...line, pictures: attachmentsOf(entry).length, texts: texts.length };
}

function titlesOf(entries: OpenedEntry[]): Map<string, string> {
  const terms = entries.flatMap(({ kind, values }) =>
    kind === 'terms' ? ((values.get('body') as TermsBody | undefined)?.schedule ?? []) : [],
  );
  return new Map(terms.map(({ item, title }) => [item, title]));
}
