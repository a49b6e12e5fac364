import 'server-only';
import { Table } from '../table';

export interface MachineRow {
  id: string;
  make: string;
  model: string;
  modelYear: string | null;
  kind: string;
  vin: string | null;
  frameNumber: string | null;
  engineNumber: string | null;
  vinCheck: string;
  distanceUnit: string;
  timeZone: string;
  firstUseOn: string | null;
  firstUseOdometer: string | null;
  archivedAt: string | null;
  createdBy: string;
  createdAt: string;
}
export const machines = new Table<MachineRow>('machines', ['id'], {
  id: 'text',
  make: 'text',
  model: 'text',
  modelYear: 'text',
  kind: 'text',
  vin: 'text',
  frameNumber: 'text',
  engineNumber: 'text',
  vinCheck: 'text',
  distanceUnit: 'text',
  timeZone: 'text',
  firstUseOn: 'text',
  firstUseOdometer: 'text',
  archivedAt: 'text',
  createdBy: 'text',
  createdAt: 'text',
});

export interface ShelfRow {
  id: string;
  name: string;
  createdBy: string;
  createdAt: string;
}
export const shelves = new Table<ShelfRow>('shelves', ['id'], {
  id: 'text',
  name: 'text',
  createdBy: 'text',
  createdAt: 'text',
});

export interface ShopRow {
  id: string;
  name: string;
  address: string | null;
  registration: string | null;
  confirmedBy: string | null;
  confirmedAt: string | null;
  createdBy: string;
  createdAt: string;
}
export const shops = new Table<ShopRow>('shops', ['id'], {
  id: 'text',
  name: 'text',
  address: 'text',
  registration: 'text',
  confirmedBy: 'text',
  confirmedAt: 'text',
  createdBy: 'text',
  createdAt: 'text',
});
