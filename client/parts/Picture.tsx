import type { ComponentChildren } from 'preact';
import { useLayoutEffect, useRef } from 'preact/hooks';
import type { Drawn } from '../chart/drawing.ts';
import { type Look, lookOf } from '../chart/look.ts';
import { usePage } from '../context.ts';
import { Exhibit } from './Exhibit.tsx';

interface PictureProps {
  /** A sentence that says what is to be seen. */
  readonly title: string;
  readonly draw: (canvas: HTMLCanvasElement, look: Look) => Drawn;
  /** The same numbers as a table. */
  readonly numbers: () => ComponentChildren;
  readonly height: 'tall' | 'low' | { readonly rows: number };
  /** What stands between title and picture: choices that belong to it. */
  readonly children?: ComponentChildren;
}

/** Width of a printed picture, and what a height comes to on paper [CSS px]. */
const PAPER_WIDTH = 660;
const PAPER_HEIGHT = { tall: 160, low: 92 };
const ROW_HEIGHT = { screen: 34, paper: 16 };
const FRAME_HEIGHT = 52;

/** An exhibit that the chart library draws. */
export function Picture({ title, draw, numbers, height, children }: PictureProps) {
  const { printing, dark } = usePage();
  const canvas = useRef<HTMLCanvasElement>(null);
  const rows =
    typeof height === 'object' ? height.rows * ROW_HEIGHT[printing ? 'paper' : 'screen'] + FRAME_HEIGHT : null;
  const paperHeight = typeof height === 'object' ? rows! : PAPER_HEIGHT[height];
  // Colours are read from the style sheet when drawn, so a change of scheme draws anew.
  useLayoutEffect(() => {
    const look = lookOf(canvas.current!, printing ? { width: PAPER_WIDTH, height: paperHeight } : null);
    const drawn = draw(canvas.current!, look);
    return () => drawn.destroy();
  }, [draw, printing, dark, paperHeight]);
  return (
    <Exhibit title={title} numbers={numbers}>
      {children}
      <div class={`plot ${rows === null ? height : ''}`} style={rows === null ? {} : { height: `${rows}px` }}>
        {/* A canvas that changes between paper and screen is a new one: its size belongs to its drawer. */}
        <canvas key={printing ? 'paper' : 'screen'} ref={canvas} role="img" aria-label={title} />
      </div>
    </Exhibit>
  );
}
