/** What one person is to the things an action touches. Somebody without a relation is `none` everywhere. */
export interface Standing {
  machine: 'owner' | 'helper' | 'none';
  shelf: 'owner' | 'helper' | 'none';
  shop: 'technician' | 'none';
  /** A record brought in from elsewhere is its importer's alone. */
  import: 'holder' | 'none';
  isSteward: boolean;
}

export const noStanding: Standing = { machine: 'none', shelf: 'none', shop: 'none', import: 'none', isSteward: false };

/**
 * Every action that is guarded, what it acts on, and who may. None of them lets a steward into a record; but where no
 * SMTP is set up, a steward reads every mail, and with a mailed link for a new password could sign in as its owner.
 */
export const access = {
  /** See the machine: its bench, schedule, spec sheet and open worksheets. */
  'read-machine': { on: 'machine', who: ['owner', 'helper'] },
  /** Change what the machine is and is judged by: identity, terms, schedule, spec sheet, who helps. */
  'set-up-machine': { on: 'machine', who: ['owner'] },
  /** Begin, fill in or discard a worksheet. */
  'edit-worksheet': { on: 'machine', who: ['owner', 'helper'] },
  /** Make a worksheet, addendum, strike or odometer reading an entry. A helper never seals. */
  seal: { on: 'machine', who: ['owner'] },
  /** Read the entries with their parts and plates. */
  'read-record': { on: 'machine', who: ['owner', 'helper'] },
  /** Show the record to others: packets, viewing links, invitations to countersign. */
  share: { on: 'machine', who: ['owner'] },
  /** Take the whole record away, prices and original files included. */
  export: { on: 'machine', who: ['owner'] },
  /** See the lots, their receipts and what is left of them. */
  'read-shelf': { on: 'shelf', who: ['owner', 'helper'] },
  /** Begin, fill in or discard a receipt that is not confirmed yet. */
  'edit-shelf': { on: 'shelf', who: ['owner', 'helper'] },
  /** Confirm a receipt, which seals it on the shelf's log; also use up, correct or dispose of what is sealed there. */
  'confirm-receipt': { on: 'shelf', who: ['owner'] },
  /** Answer an invitation in the shop's name. */
  countersign: { on: 'shop', who: ['technician'] },
  /** Read a record brought in from elsewhere, or remove it. Whoever brought it in, and nobody else. */
  'hold-import': { on: 'import', who: ['holder'] },
  /** Run the installation: accounts, shops, caught mail. */
  steward: { on: 'installation', who: ['steward'] },
} as const satisfies Record<
  string,
  | { on: 'machine' | 'shelf'; who: readonly ('owner' | 'helper')[] }
  | { on: 'shop'; who: readonly 'technician'[] }
  | { on: 'import'; who: readonly 'holder'[] }
  | { on: 'installation'; who: readonly 'steward'[] }
>;

export type Action = keyof typeof access;

export const actions = Object.keys(access) as Action[];

/**
 * Whether somebody with this standing may do this.
 *
 * @example can('seal', { ...noStanding, machine: 'helper' }) // false
 */
export function can(action: Action, standing: Standing): boolean {
  const rule = access[action];
  if (rule.on === 'installation') return standing.isSteward;
  return (rule.who as readonly string[]).includes(standing[rule.on]);
}
