import { procedureFor, procedureOfItem, type Procedure } from '@/lib/domain/procedures';
import type { ScheduleItem, Task } from '@/lib/evidence/format';
import type { Worksheet, WorksheetTask } from '@/lib/domain/worksheet';

/** What of a schedule item a task needs. */
export type NamedItem = Pick<ScheduleItem, 'item' | 'title'> & { action: Task['action'] };

/** What a new task starts with. `position` keeps tasks in the order they were chosen. */
export function newTaskFields(
  id: string,
  chosen: { procedure: Procedure; item?: NamedItem },
  position: number,
): Record<string, string> {
  const { procedure, item } = chosen;
  const at = `tasks/${id}`;
  const scheduleItem = item?.item ?? procedure.scheduleItems[0];
  return {
    [`${at}/key`]: procedure.key,
    ...(procedure.key === 'free' && !item
      ? {}
      : { [`${at}/title`]: procedure.key === 'free' && item ? item.title : procedure.title }),
    [`${at}/action`]: procedure.key === 'free' && item ? item.action : procedure.action,
    ...(scheduleItem ? { [`${at}/scheduleItem`]: scheduleItem } : {}),
    [`${at}/position`]: String(position),
  };
}

/** How a schedule item is done: by its procedure, else as other work under the item's own name. */
export function workFor(item: NamedItem): { procedure: Procedure; item: NamedItem } {
  return { procedure: procedureOfItem(item.item) ?? procedureFor('free'), item };
}

export interface TaskProgress {
  done: number;
  all: number;
  /** Key of the first hold point not done. */
  next: string | undefined;
}

export function taskProgress(task: WorksheetTask): TaskProgress {
  const { holdPoints } = procedureFor(task.key);
  const open = holdPoints.filter(({ key }) => task.steps[key] === undefined);
  return { done: holdPoints.length - open.length, all: holdPoints.length, next: open[0]?.key };
}

/** How far a task is, in words. */
export function progressWords(task: WorksheetTask): string {
  const { done, all } = taskProgress(task);
  if (all === 0) return task.inspections.length + task.parts.length + task.torques.length > 0 ? 'Begun' : 'Open';
  if (done === 0) return `${all} hold points`;
  return done === all ? `All ${all} hold points done` : `${done} of ${all} hold points done`;
}

/** The screen after this one: the next task, then the photos, then the summary. */
export function nextScreen(worksheet: Worksheet, screen: string): { screen: string; text: string } {
  const order = [
    { screen: 'tasks', text: 'Choose tasks' },
    { screen: 'start', text: 'odometer and times' },
    ...worksheet.tasks.map((task) => ({ screen: task.id, text: taskTitle(task).toLowerCase() })),
    { screen: 'photos', text: 'photos' },
    { screen: 'summary', text: 'summary' },
  ];
  const index = order.findIndex((one) => one.screen === screen);
  return order[index + 1] ?? { screen: 'summary', text: 'summary' };
}

export function taskTitle(task: WorksheetTask): string {
  return task.title ?? procedureFor(task.key).title;
}
