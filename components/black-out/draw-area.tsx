'use client';

import { useRef, useState, type PointerEvent } from 'react';
import { coveredPixels, type PictureBox } from '@/lib/domain/black-boxes';
import { boxBetween, type Point } from './box-state';

export interface DrawAreaProps {
  src: string;
  alt: string;
  boxes: readonly PictureBox[];
  /** The box that has the keyboard. */
  current: number | null;
  /** Shown as it will be: black, outward to the squares of the new picture. */
  isPreview: boolean;
  onDraw: (box: PictureBox) => void;
}

/** The picture, large; a finger or a mouse draws boxes on it, and the page stays where it is meanwhile. */
export function DrawArea({ src, alt, boxes, current, isPreview, onDraw }: DrawAreaProps) {
  const [size, setSize] = useState<{ width: number; height: number } | null>(null);
  const [from, setFrom] = useState<Point | null>(null);
  const [to, setTo] = useState<Point | null>(null);
  const picture = useRef<HTMLImageElement>(null);

  const at = ({ clientX, clientY }: PointerEvent): Point => {
    const { left, top, width, height } = picture.current?.getBoundingClientRect() ?? new DOMRect(0, 0, 1, 1);
    return { x: (clientX - left) / width, y: (clientY - top) / height };
  };
  const begin = (event: PointerEvent<HTMLDivElement>) => {
    if (isPreview || !event.isPrimary || event.button !== 0) return;
    event.currentTarget.setPointerCapture(event.pointerId);
    setFrom(at(event));
    setTo(at(event));
  };
  const end = (event: PointerEvent<HTMLDivElement>) => {
    const box = from === null ? null : boxBetween(from, at(event));
    if (box !== null) onDraw(box);
    cancel();
  };
  const cancel = () => {
    setFrom(null);
    setTo(null);
  };
  const drawn = from === null || to === null ? null : boxBetween(from, to);
  return (
    <div
      data-testid="draw-area"
      className="relative w-fit max-w-full cursor-crosshair touch-none border border-edge bg-steel select-none"
      onPointerDown={begin}
      onPointerMove={(event) => (from === null ? undefined : setTo(at(event)))}
      onPointerUp={end}
      onPointerCancel={cancel}
    >
      <img
        ref={(image) => {
          picture.current = image;
          // One that came from the browser's cache was there before anybody listened.
          if (image?.complete && size === null && image.naturalWidth > 0) setSize(sizeOf(image));
        }}
        src={src}
        alt={alt}
        draggable={false}
        className="block max-h-[75vh] w-auto max-w-full"
        onLoad={(event) => setSize(sizeOf(event.currentTarget))}
      />
      <svg
        aria-hidden
        className="pointer-events-none absolute inset-0 h-full w-full"
        viewBox="0 0 1 1"
        preserveAspectRatio="none"
      >
        {' '}
        {/* prettier-ignore */}
        {isPreview && size !== null
          ? boxes.map((box, index) => <BlackBox key={index} box={asItWillBe(box, size)} />)
          : boxes.map((box, index) => <OpenBox key={index} box={box} isCurrent={index === current} />)}
        {drawn === null ? null : <OpenBox box={drawn} isCurrent />}
      </svg>
    </div>
  );
}

const sizeOf = ({ naturalWidth, naturalHeight }: HTMLImageElement) => ({ width: naturalWidth, height: naturalHeight });

function asItWillBe(box: PictureBox, size: { width: number; height: number }): PictureBox {
  const covered = coveredPixels(box, size);
  if (covered === null) return box;
  const { left, top, right, bottom } = covered;
  return {
    left: left / size.width,
    top: top / size.height,
    width: (right - left) / size.width,
    height: (bottom - top) / size.height,
  };
}

const placeOf = ({ left, top, width, height }: PictureBox) => ({ x: left, y: top, width, height });

/** What the picture will show is the same in both themes, so these colours are no theme's. */
function BlackBox({ box }: { box: PictureBox }) {
  return <rect {...placeOf(box)} fill="#000000" />;
}

function OpenBox({ box, isCurrent }: { box: PictureBox; isCurrent: boolean }) {
  const line = { fill: 'none', vectorEffect: 'non-scaling-stroke' } as const;
  return (
    <>
      <rect {...placeOf(box)} fill="#000000" fillOpacity={0.55} />
      <rect {...placeOf(box)} {...line} stroke="#000000" strokeWidth={isCurrent ? 6 : 4} />
      <rect {...placeOf(box)} {...line} stroke="#ffffff" strokeWidth={isCurrent ? 3 : 1.5} />
    </>
  );
}
