import 'server-only';
import { Op } from 'sequelize';
import { stampJobs, type StampJobRow } from '../models/logs';

/** Checkpoints that wait for a time stamp and whose next try has come, the longest due first. */
export function dueStampJobs(at: string, limit: number): Promise<StampJobRow[]> {
  const order: [keyof StampJobRow & string, 'ASC' | 'DESC'][] = [
    ['nextTryAt', 'ASC'],
    ['size', 'ASC'],
  ];
  return stampJobs.all({ doneAt: null, nextTryAt: { [Op.lte]: at } }, { order, limit });
}
