export type Demo = 'none' | 'demo' | 'demo-times-injected';

const words = { demo: 'Demo: everything here is invented', 'demo-times-injected': 'demo, times injected' } as const;

/** Says on every page, and in print, that what it shows is not a real record. */
export function DemoStrip({ demo }: { demo: Demo }) {
  if (demo === 'none') return null;
  return (
    <aside
      aria-label="About this installation"
      className="border-b border-line bg-steel px-4 py-0.5 text-center text-sm font-medium text-ink"
    >
      {words[demo]}
    </aside>
  );
}
