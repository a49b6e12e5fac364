export interface ThumbProps {
  src: string;
  /** What the picture shows: "Receipt, front". */
  alt: string;
  /** A receipt is upright and cut at its foot; a photo is square; a pdf has no picture of its own. */
  kind: 'receipt' | 'photo' | 'pdf';
}

const shapes = { receipt: 'h-14 w-11 object-top', photo: 'size-14 object-center', pdf: 'h-14 w-11' } as const;

export function Thumb({ src, alt, kind }: ThumbProps) {
  if (kind === 'pdf')
    return (
      <span
        role="img"
        aria-label={`${alt}, PDF`}
        className="figure flex h-14 w-11 shrink-0 items-end justify-center border border-edge bg-paper pb-1 text-lg"
      >
        PDF
      </span>
    );
  return (
    // A plain img: thumbnails are made at upload, at the size they are shown in.
    <img
      src={src}
      alt={alt}
      loading="lazy"
      decoding="async"
      className={`shrink-0 border border-edge bg-steel object-cover ${shapes[kind]}`}
    />
  );
}
