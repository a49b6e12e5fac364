import 'server-only';
import { Op } from 'sequelize';
import type { Transaction } from '../index';
import {
  attempts,
  mailTokens,
  people,
  relations,
  sessions,
  type MailTokenRow,
  type PersonRow,
  type RelationRow,
  type SessionRow,
} from '../models/people';
import { shops, type ShopRow } from '../models/machines';

export type { MailTokenRow, PersonRow, RelationRow, SessionRow, ShopRow };

interface In {
  transaction?: Transaction;
}
/** Required wherever rows change: a write outside the queue's transaction would starve the others. */
interface Within {
  transaction: Transaction;
}

export const findPerson = (id: string, within: In = {}) => people.find({ id }, within);
/** What those of these ids who have an account are called. */
export const namesOfIds = async (ids: Iterable<string>): Promise<string[]> =>
  (await people.all({ id: [...new Set(ids)] })).map(({ name }) => name);
/** `email` in the one spelling kept, lower case. */
export const findPersonByEmail = (email: string, within: In = {}) => people.find({ email }, within);
export const insertPerson = (row: PersonRow, within: Within) => people.insert(row, within);

export async function updatePerson(id: string, values: Partial<Omit<PersonRow, 'id'>>, within: Within) {
  await people.update({ id }, values, within);
}

export async function listPeople({ limit, offset }: { limit: number; offset: number }) {
  const [rows, total] = await Promise.all([
    people.all(
      {},
      {
        order: [
          ['createdAt', 'DESC'],
          ['id', 'ASC'],
        ],
        limit,
        offset,
      },
    ),
    people.count(),
  ]);
  // A list has no business with the hashes.
  return { total, people: rows.map(({ passwordHash: _, ...shown }) => shown) };
}

export const findSession = (id: string) => sessions.find({ id });
export const insertSession = (row: SessionRow, within: Within) => sessions.insert(row, within);

export async function touchSession(id: string, at: string, within: Within) {
  await sessions.update({ id }, { lastSeenAt: at }, within);
}

/** Sessions not ended and not past their last day, the most recently seen first. */
export const listSessions = (personId: string, at: string) =>
  sessions.all({ personId, endedAt: null, expiresAt: { [Op.gt]: at } }, { order: [['lastSeenAt', 'DESC']] });

/** Ends one session of this person; somebody else's id ends nothing. Returns whether one was ended. */
export async function endSession(options: { id: string; personId: string; at: string }, within: Within) {
  const { id, personId, at } = options;
  return (await sessions.update({ id, personId, endedAt: null }, { endedAt: at }, within)) > 0;
}

/** Ends every session of a person but one, where one is named. Returns how many were ended. */
export function endSessions(options: { personId: string; except?: string | undefined; at: string }, within: Within) {
  const { personId, except, at } = options;
  const others = except === undefined ? {} : { id: { [Op.ne]: except } };
  return sessions.update({ personId, endedAt: null, ...others }, { endedAt: at }, within);
}

export const insertMailToken = (row: MailTokenRow, within: Within) => mailTokens.insert(row, within);
export const findMailToken = (tokenHash: string, within: In = {}) => mailTokens.find({ tokenHash }, within);

/** Marks a token as used. False when it was used before, so that of two at once only one goes on. */
export async function markMailTokenUsed(tokenHash: string, at: string, within: Within) {
  return (await mailTokens.update({ tokenHash, usedAt: null }, { usedAt: at }, within)) === 1;
}

/** Makes every other unused token of this purpose worthless. */
export async function spendMailTokens(personId: string, purpose: string, at: string, within: Within) {
  await mailTokens.update({ personId, purpose, usedAt: null }, { usedAt: at }, within);
}

/** Takes what is secret out of tokens nobody can use any more. */
export async function removeDeadMailTokens(before: string, within: Within) {
  await mailTokens.remove({ expiresAt: { [Op.lt]: before } }, within);
}

export const countAttempts = (key: string, since: string, within: In = {}) =>
  attempts.count({ key, at: { [Op.gt]: since } }, within);
export const insertAttempts = (keys: string[], at: string, within: Within) =>
  attempts.insertMany(
    keys.map((key) => ({ key, at })),
    within,
  );
export const removeAttempts = (keys: string[], within: Within) => attempts.remove({ key: { [Op.in]: keys } }, within);
export const removeOldAttempts = (before: string, within: Within) =>
  attempts.remove({ at: { [Op.lt]: before } }, within);

/** The relation in force at `at`, or null. An owner's comes before a helper's. */
export async function findRelation(
  options: { personId: string; subjectKind: RelationRow['subjectKind']; subjectId: string; at: string },
  within: In = {},
): Promise<RelationRow['relation'] | null> {
  const { personId, subjectKind, subjectId, at } = options;
  const rows = await relations.all(
    { personId, subjectKind, subjectId, since: { [Op.lte]: at }, until: { [Op.or]: [null, { [Op.gt]: at }] } },
    within,
  );
  const held = rows.map((row) => row.relation);
  return held.includes('owner') ? 'owner' : (held[0] ?? null);
}

export const findShop = (id: string, within: In = {}) => shops.find({ id }, within);

/** Those nobody has confirmed come first. */
export async function listShops({ limit, offset }: { limit: number; offset: number }) {
  const [rows, total, unconfirmed] = await Promise.all([
    shops.all(
      {},
      {
        order: [
          ['confirmedAt', 'ASC'],
          ['createdAt', 'DESC'],
        ],
        limit,
        offset,
      },
    ),
    shops.count(),
    shops.count({ confirmedAt: null }),
  ]);
  return { total, unconfirmed, shops: rows };
}

/** Returns false when there is no such shop or it is confirmed already. */
export async function confirmShop(options: { id: string; by: string; at: string }, within: Within) {
  const { id, by, at } = options;
  return (await shops.update({ id, confirmedAt: null }, { confirmedAt: at, confirmedBy: by }, within)) === 1;
}
