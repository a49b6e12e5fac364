import 'server-only';
import { Op } from 'sequelize';
import { stampJobs, type StampJobRow } from '../models/logs';

/** One authority's checkpoints that wait for a time stamp and whose next try has come, the longest due first. */
export function dueStampJobs(due: { authority: string; at: string; limit: number }): Promise<StampJobRow[]> {
  const order: [keyof StampJobRow & string, 'ASC' | 'DESC'][] = [
    ['nextTryAt', 'ASC'],
    ['size', 'ASC'],
  ];
  const isDue = { authority: due.authority, doneAt: null, nextTryAt: { [Op.lte]: due.at } };
  return stampJobs.all(isDue, { order, limit: due.limit });
}

/** Every checkpoint that waits for a time stamp, those tried most often first. */
export function waitingStampJobs(limit: number): Promise<StampJobRow[]> {
  const order: [keyof StampJobRow & string, 'ASC' | 'DESC'][] = [
    ['attempts', 'DESC'],
    ['nextTryAt', 'ASC'],
  ];
  return stampJobs.all({ doneAt: null }, { order, limit });
}
