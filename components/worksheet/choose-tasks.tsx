'use client';

import { useDraftInScreen } from '@/components/garage/draft-context';
import { mintId } from '@/components/garage/mint-id';
import { Checkbox } from '@/components/ui/checkbox';
import { procedureFor, procedures, type Procedure } from '@/lib/domain/procedures';
import type { WorksheetTask } from '@/lib/domain/worksheet';
import { newTaskFields, workFor, type NamedItem } from './task-fields';
import { useWorksheet } from './worksheet-context';

interface Offer {
  key: string;
  title: string;
  words?: string;
  isDue: boolean;
  procedure: Procedure;
  item?: NamedItem;
}

const isSame = (task: WorksheetTask, offer: Offer): boolean =>
  offer.procedure.key === 'free' ? task.scheduleItem === offer.item?.item : task.key === offer.procedure.key;

const isSameWork = (one: Offer, other: Offer): boolean =>
  one.procedure.key === other.procedure.key && (one.procedure.key !== 'free' || one.item?.item === other.item?.item);

/** Tasks by one tap each: what is due first, then all there are. */
export function ChooseTasks() {
  const { machine, worksheet } = useWorksheet();
  const schedule = machine?.terms?.schedule ?? [];
  const due = (machine?.due ?? []).map(({ item, title, words, isDue }): Offer => {
    // An item the terms on this phone do not have yet is offered all the same, under the name the server gave it.
    const line = schedule.find((one) => one.item === item) ?? ({ item, title, action: 'other' } as const);
    const work = workFor(line);
    const name = work.procedure.key === 'free' ? line.title : work.procedure.title;
    return { key: `item-${item}`, title: name, words, isDue, ...work };
  });
  // Two items may be done by one procedure; it is offered once, with the more pressing words.
  const byWork = due.filter((offer, index) => due.findIndex((one) => isSameWork(one, offer)) === index);
  const rest = procedures
    .filter(({ key }) => key !== 'free' && !byWork.some(({ procedure }) => procedure.key === key))
    .map((procedure): Offer => ({ key: procedure.key, title: procedure.title, isDue: false, procedure }));
  const others = worksheet.tasks.filter((task) => ![...byWork, ...rest].some((offer) => isSame(task, offer)));
  return (
    <div className="space-y-6">
      <Offers title="Soonest due first" offers={byWork} emptyText="Nothing is scheduled for this machine." />
      {rest.length === 0 ? null : <Offers title="Other tasks" offers={rest} />}
      <OtherWork tasks={others} />
    </div>
  );
}

function Offers({ title, offers, emptyText }: { title: string; offers: readonly Offer[]; emptyText?: string }) {
  return (
    <fieldset>
      <legend className="figure mb-1 text-xl">{title}</legend>
      {offers.length === 0 && emptyText ? <p className="tag">{emptyText}</p> : null}
      <ul className="border-t border-line">
        {offers.map((offer) => (
          <OfferLine key={offer.key} offer={offer} />
        ))}
      </ul>
    </fieldset>
  );
}

function OfferLine({ offer }: { offer: Offer }) {
  const { opened } = useDraftInScreen();
  const { worksheet } = useWorksheet();
  const task = worksheet.tasks.find((one) => isSame(one, offer));
  function toggle() {
    if (task) void opened.set({ [`tasks/${task.id}/removed`]: 'yes' });
    else void opened.set(newTaskFields(mintId(), offer, worksheet.tasks.length + 1));
  }
  return (
    <li className="border-b border-line">
      <Checkbox
        size="big"
        checked={task !== undefined}
        onChange={toggle}
        label={
          <>
            <span className="block font-medium">{offer.title}</span>
            {offer.words ? (
              <span className={offer.isDue ? 'tone-warn block text-[0.9375rem]' : 'tag block'}>{offer.words}</span>
            ) : null}
          </>
        }
      />
    </li>
  );
}

/** Work no procedure covers, under the name its person gives it. */
function OtherWork({ tasks }: { tasks: readonly WorksheetTask[] }) {
  const { opened } = useDraftInScreen();
  const { worksheet } = useWorksheet();
  const free = procedureFor('free');
  return (
    <fieldset>
      <legend className="figure mb-1 text-xl">Other work</legend>
      <ul className="border-t border-line">
        {tasks.map((task) => (
          <li key={task.id} className="border-b border-line">
            <Checkbox
              size="big"
              checked
              onChange={() => void opened.set({ [`tasks/${task.id}/removed`]: 'yes' })}
              label={<span className="font-medium">{task.title ?? 'Other work, not named yet'}</span>}
            />
          </li>
        ))}
        <li className="border-b border-line">
          <Checkbox
            size="big"
            checked={false}
            onChange={() => void opened.set(newTaskFields(mintId(), { procedure: free }, worksheet.tasks.length + 1))}
            label={
              <span className="font-medium">{tasks.length === 0 ? 'Something else' : 'Something else again'}</span>
            }
          />
        </li>
      </ul>
    </fieldset>
  );
}
