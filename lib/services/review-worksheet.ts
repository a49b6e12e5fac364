import 'server-only';
import { findLogOf, readHead } from '@/db/queries/logs';
import type { PersonRow } from '@/db/models/people';
import { standingOf } from '@/lib/auth/guard';
import { procedureFor } from '@/lib/domain/procedures';
import { notFound } from '@/lib/errors';
import type { ServiceBody } from '@/lib/evidence/format';
import { paths } from '@/lib/paths';
import { now } from '@/lib/ports/clock';
import { composeWorksheet, type ComposedWorksheet } from './compose-worksheet';
import { demandDraft, refuseClosed } from './draft-access';
import { machineName } from './list-machines';
import { nameOfPeople, withPerformers } from './names-of-people';

export interface Problem {
  field: string;
  /** Which part of the worksheet: a task's title, `Times and odometer` … */
  where: string;
  sentence: string;
  /** Leads to the screen of the worksheet where it is put right. */
  href: string;
}
export interface WorksheetReview {
  worksheet: string;
  machine: { id: string; name: string };
  /** Set once it is sealed: there is nothing left to review. */
  sealedAs: number | null;
  /** The number the entry would have now. */
  nextSeq: number;
  composed: ComposedWorksheet | null;
  /** What would be sealed, as people read it. */
  body: ServiceBody | null;
  problems: Problem[];
  mayISeal: boolean;
}

/** The screen of the offline shell that holds a field. */
function screenOf(field: string): string {
  const task = /^tasks\/([^/]+)/.exec(field)?.[1];
  if (task !== undefined) return task;
  if (field === 'tasks') return 'tasks';
  return /^(startedAt|finishedAt|zone|odometer|engineHours|performedBy|recorded)/.test(field) ? 'times' : 'summary';
}

function whereOf(field: string, composed: ComposedWorksheet): string {
  const screen = screenOf(field);
  if (screen === 'times') return 'Times and odometer';
  const task = composed.worksheet.tasks.find(({ id }) => id === screen);
  if (task !== undefined) return task.title ?? procedureFor(task.key).title;
  return field.startsWith('photos/') ? 'Pictures' : 'The worksheet';
}

/** The entry exactly as it would be sealed now, and what keeps it from being sealed. */
export async function reviewWorksheet(options: { person: PersonRow; draftId: string }): Promise<WorksheetReview> {
  const { person, draftId } = options;
  const draft = await demandDraft({ person, draftId });
  const log = await findLogOf(draft.subjectId);
  if (draft.kind !== 'worksheet' || log === null) throw notFound('worksheet');
  if (draft.state === 'discarded') throw refuseClosed(draft);
  const head = await readHead(log.id);
  const composed = draft.state === 'open' ? await composeWorksheet({ draft, person, at: now().toISOString() }) : null;
  const { machine } = await standingOf(person, { machine: draft.subjectId });
  return {
    worksheet: draftId,
    machine: { id: draft.subjectId, name: composed === null ? '' : machineName(composed.machine) },
    sealedAs: draft.state === 'sealed' ? draft.sealedSeq : null,
    nextSeq: (head?.lastEntry?.seq ?? -1) + 1,
    composed,
    body: composed?.body === undefined ? null : withPerformers(composed.body, nameOfPeople([composed.author])),
    problems: Object.entries(composed?.problems ?? {}).map(([field, sentence]) => ({
      field,
      where: composed === null ? '' : whereOf(field, composed),
      sentence,
      href: `${paths.worksheet(draftId)}/${screenOf(field)}`,
    })),
    mayISeal: machine === 'owner',
  };
}
