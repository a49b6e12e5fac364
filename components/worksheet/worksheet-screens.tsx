'use client';

import { useEffect, useRef } from 'react';
import { worksheetHash } from '@/components/garage/place';
import { progressWords, taskTitle } from './task-fields';
import { useWorksheet } from './worksheet-context';

/** All screens of a worksheet: a row that scrolls on a phone, a column on a desk. */
export function WorksheetScreens({ current }: { current: string }) {
  const { id, worksheet } = useWorksheet();
  const here = useRef<HTMLAnchorElement>(null);
  useEffect(() => {
    here.current?.scrollIntoView({ block: 'nearest', inline: 'center' });
  }, [current]);
  const screens = [
    { screen: 'tasks', text: 'Tasks', words: undefined },
    { screen: 'start', text: 'Odometer and times', words: undefined },
    ...worksheet.tasks.map((task) => ({ screen: task.id, text: taskTitle(task), words: progressWords(task) })),
    { screen: 'photos', text: 'Photos', words: undefined },
    { screen: 'summary', text: 'Summary', words: undefined },
  ];
  return (
    <nav aria-label="Screens of this worksheet" className="not-printed -mx-4 mb-4 overflow-x-auto px-4 lg:mx-0 lg:px-0">
      <ol className="flex w-max min-w-full border-y border-line lg:block lg:w-auto lg:border-b-0">
        {screens.map(({ screen, text, words }) => (
          <li
            key={screen}
            className="shrink-0 border-r border-line last:border-r-0 lg:border-r-0 lg:border-b lg:last:border-b"
          >
            <a
              ref={screen === current ? here : null}
              href={worksheetHash(id, screen)}
              aria-current={screen === current ? 'step' : undefined}
              className="flex min-h-14 flex-col justify-center px-3 leading-tight font-medium aria-[current=step]:bg-petrol aria-[current=step]:text-petrol-ink lg:px-2"
            >
              {text}
              {words ? <span className="hidden text-[0.9375rem] font-normal opacity-90 lg:block">{words}</span> : null}
            </a>
          </li>
        ))}
      </ol>
    </nav>
  );
}
