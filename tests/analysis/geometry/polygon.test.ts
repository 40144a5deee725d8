import { expect, test } from 'vitest';
import { polygonArea, polygonAreaInFrame } from '../../../analysis/geometry/polygon.ts';

const frame = { width: 10, height: 8 };

// Truth: plane geometry.
test('a triangle has half the area of its box', () => {
  const triangle = [
    { x: 0, y: 0 },
    { x: 4, y: 0 },
    { x: 1, y: 3 },
  ];
  expect(polygonArea(triangle)).toBe(6);
  expect(polygonArea(triangle.toReversed())).toBe(6);
});

test('of a square turned by 45° about the frame’s corner a quarter lies inside', () => {
  const square = [
    { x: -2, y: 0 },
    { x: 0, y: -2 },
    { x: 2, y: 0 },
    { x: 0, y: 2 },
  ];
  expect(polygonAreaInFrame(square, frame)).toBeCloseTo(2, 12);
});

test('a polygon around the frame is cut to the frame, one beside it to nothing', () => {
  const around = [
    { x: -5, y: -5 },
    { x: 20, y: -5 },
    { x: 20, y: 20 },
    { x: -5, y: 20 },
  ];
  expect(polygonAreaInFrame(around, frame)).toBe(80);
  expect(
    polygonAreaInFrame(
      around.map(({ x, y }) => ({ x: x + 40, y })),
      frame,
    ),
  ).toBe(0);
});
