/** Demo accounts exist only where the demo is seeded; their passwords are public on purpose. */
export const demoAccounts = [
  { email: 'imke@witnessmark.example', password: 'paint-the-bolt-17', name: 'Imke Vandersloot', role: 'rider' },
  { email: 'joost@witnessmark.example', password: 'hold-the-lamp-23', name: 'Joost Vandersloot', role: 'helper' },
  { email: 'teodora@halyard.example', password: 'torque-then-mark-31', name: 'Teodora Lindqvist', role: 'shop' },
  { email: 'steward@witnessmark.example', password: 'keys-in-the-drawer-8', name: 'Steward', role: 'steward' },
] as const;

export type DemoRole = (typeof demoAccounts)[number]['role'];
