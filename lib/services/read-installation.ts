import 'server-only';
import { listPeople, listShops } from '@/db/queries/people';

/** What the steward sees of the accounts: never a password's hash. */
export const readAccounts = ({ page, perPage }: { page: number; perPage: number }) =>
  listPeople({ limit: perPage, offset: (page - 1) * perPage });

export const readShops = ({ page, perPage }: { page: number; perPage: number }) =>
  listShops({ limit: perPage, offset: (page - 1) * perPage });
