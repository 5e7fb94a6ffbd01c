import { expect, it } from 'vitest';
import { placeNames, raiseClear } from '../../client/labels.ts';

const area = { left: 0, top: 0, right: 200, bottom: 140 };
const size = { width: 40, height: 12 };

it('puts a name beside its line, near its end, clear of the other lines', () => {
  const lines = [
    [
      { x: 0, y: 90 },
      { x: 100, y: 80 },
    ],
    [
      { x: 0, y: 70 },
      { x: 200, y: 65 },
    ],
  ];
  const boxes = placeNames({ lines, sizes: [size, size], marks: [], area });
  for (const box of boxes) {
    expect(box).not.toBeNull();
    for (const [from, to] of lines as [{ x: number; y: number }, { x: number; y: number }][]) {
      for (let x = Math.max(from.x, box!.left); x <= Math.min(to.x, box!.right); x++) {
        const y = from.y + ((to.y - from.y) * (x - from.x)) / (to.x - from.x);
        expect(y < box!.top || y > box!.bottom).toBe(true);
      }
    }
  }
  expect(boxes[1]!.right).toBe(200);
});

it('has no place for a name where lines are too close', () => {
  const lines = Array.from({ length: 30 }, (_, i) => [
    { x: 0, y: i * 5 },
    { x: 200, y: i * 5 },
  ]);
  expect(placeNames({ lines, sizes: lines.map(() => size), marks: [], area }).every((box) => box === null)).toBe(true);
});

it('raises a name by rows until it covers none', () => {
  const box = { left: 10, right: 50, top: 80, bottom: 95 };
  expect(raiseClear(box, [])).toEqual(box);
  expect(raiseClear(box, [box, { ...box, top: 65, bottom: 80 }])).toEqual({ ...box, top: 50, bottom: 65 });
});

it('keeps off a mark, also between its ends', () => {
  const line = [
    { x: 0, y: 60 },
    { x: 200, y: 60 },
  ];
  const mark = [
    { x: 175, y: 0 },
    { x: 175, y: 140 },
  ];
  const [box] = placeNames({ lines: [line], sizes: [size], marks: [mark], area });
  expect(box!.right).toBeLessThan(175);
});
