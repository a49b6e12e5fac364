// Five drawn grades: each adds something the one before has not, so that they differ by shape, not by shade.
const paste = 'M9 21C13 17 18 20 24 18S35 17 39 21L37 25C31 22 27 25 23 24S14 24 11 25Z';
const fuzz = [11, 15, 19, 23, 27, 31, 35];

/** What a grade of debris looks like on the end of a magnetic plug. The words stand beside it. */
export function DebrisFigure({ grade }: { grade: string }) {
  return (
    <svg
      aria-hidden="true"
      viewBox="0 0 48 40"
      width="42"
      height="35"
      className="-mx-1 fill-none stroke-current stroke-[1.5]"
    >
      <path d="M8 26H40V32H8ZM15 32V38H33V32" />
      {grade === '1' ? fuzz.map((x, index) => <path key={x} d={`M${x} 26L${x + (index % 2 ? 2 : -1)} 21`} />) : null}
      {grade === '2' || grade === '3' ? <path d={paste} className="fill-current" /> : null}
      {grade === '3' ? <path d="M12 16L18 9M22 15L24 6M29 15L36 8M38 16L42 13" className="stroke-2" /> : null}
      {grade === '4' ? (
        <path
          d="M9 25L11 15L19 17L21 25ZM23 24L25 11L33 8L36 16L31 24ZM34 26L38 19L43 22L41 26Z"
          className="fill-current"
        />
      ) : null}
    </svg>
  );
}
