export function SkipLink() {
  return (
    <a
      href="#content"
      className="sr-only bg-ink px-4 py-3 font-semibold text-paper focus:not-sr-only focus:fixed focus:top-2 focus:left-2 focus:z-50"
    >
      Skip to the content
    </a>
  );
}
