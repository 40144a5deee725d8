import type { ReactElement } from 'react';
import { renderToStaticMarkup } from 'react-dom/server';
import { describe, expect, test } from 'vitest';
import { AbPlane } from '@/components/pictures/ab-plane';
import { arcPath } from '@/components/pictures/draw';
import { framePicture, hairFactor } from '@/components/pictures/frame-data';
import { FrameMap } from '@/components/pictures/frame-map';
import { GradeDial } from '@/components/pictures/grade-dial';
import { Histogram } from '@/components/pictures/histogram';
import { placeLabels } from '@/components/pictures/labels';
import { MtfCurves } from '@/components/pictures/mtf-curves';
import { RegistrationOverlay } from '@/components/pictures/registration-overlay';
import { ScaleLine } from '@/components/pictures/scale-line';
import { ShadingMap } from '@/components/pictures/shading-map';
import { ToneCurve } from '@/components/pictures/tone-curve';
import type { FramePicture } from '@/lib/shared/report';
import { colours, content, histogram, rules, shading, size, stations, tone } from './fixture';

const frame = content.frame as FramePicture;

/** What a screen reader is told, and every cell of the table. */
function read(element: ReactElement) {
  const html = renderToStaticMarkup(element);
  const label = /role="img"[^>]*aria-label="([^"]*)"|aria-label="([^"]*)"[^>]*role="img"/.exec(
    html,
  );
  const cells = [...html.matchAll(/<t[hd][^>]*>([^<]*)<\/t[hd]>/g)].map((match) => match[1]);
  return { html, label: label?.[1] ?? label?.[2] ?? '', cells };
}

describe('each picture says in words and in a table what it draws', () => {
  test('the frame: every station with its share and its displacement', () => {
    const { label, cells } = read(<FrameMap frame={frame} />);
    expect(label).toContain('lower right 55 %');
    expect(cells).toEqual(expect.arrayContaining(['Lower right', '0.171', '55', '0.64, 0.46']));
    expect(cells.filter((cell) => cell === 'Middle')).toHaveLength(1);
  });

  test('curves: where each falls to half, and the response by frequency', () => {
    const { label, cells } = read(<MtfCurves curves={content.curves} />);
    // responseOf() is one half at mtf50 by construction; straight lines between samples keep it within 0.002.
    expect(label).toMatch(/middle falls to half at 0\.3(09|10|11)/);
    expect(label).toMatch(/lower right falls to half at 0\.17[0-2]/);
    expect(cells).toContain('0.25');
  });

  test('histogram: the share darker than mid grey, and sixteen groups of codes', () => {
    const bins = Array.from({ length: 64 }, (_, bin) =>
      bin === 10 ? 0.75 : bin === 50 ? 0.25 : 0,
    );
    const { label, cells } = read(<Histogram bins={bins} />);
    expect(label).toContain('75 % of the frame is darker than code 118');
    expect(cells).toContain('75.0');
    expect(cells.filter((cell) => cell?.includes('–'))).toHaveLength(16);
  });

  test('colours: mean and largest difference, each disc in the table', () => {
    const { label, cells } = read(<AbPlane colours={colours} />);
    expect(label).toContain('24 colours');
    expect(cells).toContain('hue-000');
  });

  test('tone: the grey nearest to 18 %, each grey in the table', () => {
    const { label, cells } = read(<ToneCurve tone={tone} />);
    expect(label).toMatch(/the \d+ % grey came out at code \d+; 18 % belongs at 118/);
    expect(cells.filter((cell) => cell === 'yes' || cell === 'no')).toHaveLength(12);
  });

  test('shading: the four corners in EV', () => {
    const { label, cells } = read(<ShadingMap shading={shading} />);
    expect(label).toContain('lower right −1.41 EV');
    expect(cells).toContain('−1.41');
  });

  test('registration: what was found, and the rings in pixels', () => {
    const { label, cells } = read(
      <RegistrationOverlay
        {...size}
        src="/view"
        alt="The target"
        plots={{ stations, discs: [] }}
        registration={{
          target: '4x3',
          residual: 0.214,
          rotation: -1.25,
          coverage: 0.88,
          rings: { 'top-left': [101.25, 99.5] },
        }}
      />,
    );
    expect(label).toContain('13 stations');
    expect(cells).toEqual(expect.arrayContaining(['top-left', '101.3, 99.5', '0.214', '88']));
  });

  test('a rule on its scale: value, doubt, limits and peers', () => {
    const { label } = read(<ScaleLine data={rules[0]!} />);
    expect(label).toContain('Exposure: −0.68 ± 0.06');
    expect(label).toContain('clearly outside');
    expect(label).toContain('A from −0.4 up to 0.4');
    expect(label).toContain('6 other cameras of this model between −0.70 and −0.40');
  });

  test('the dial: its letter and how many rules stand where', () => {
    const { label } = read(<GradeDial letter="B" rules={rules} />);
    expect(label).toBe(
      'Grade B: of 12 rules 8 clearly within, 2 in doubt, 1 clearly outside, 1 not tested',
    );
  });
});

test('a value beyond its scale stands at the scale’s end', () => {
  const rule = { ...rules[0]!, value: -9, peers: [] };
  const html = renderToStaticMarkup(<ScaleLine data={rule} />);
  expect(html).toContain('<svg aria-hidden="true" x="2.5%"');
});

test('a rule that was not tested draws no disc and says so', () => {
  const untested = rules.find((rule) => rule.standing === 'untested')!;
  const { html, label } = read(<ScaleLine data={untested} />);
  expect(html).not.toContain('<circle');
  expect(label).toContain('not tested');
});

test('no hair leaves its ring, and the factor is the largest round one', () => {
  const longest = Math.max(
    ...frame.stations.flatMap(({ red, blue }) => [
      Math.hypot(red!.x, red!.y),
      Math.hypot(blue!.x, blue!.y),
    ]),
  );
  const factor = hairFactor(frame, 100);
  expect(factor * longest).toBeLessThanOrEqual(100);
  expect(factor).toBeGreaterThan(1);
  expect(hairFactor({ ...frame, stations: [] }, 100)).toBe(1);
});

test('without peers the middle closes its own ring; without any sharpness there is no picture', () => {
  expect(framePicture(stations, size)?.fullCircle).toBe(0.31);
  expect(framePicture(stations, size, 0.4)?.fullCircleMeans).toBe('peers');
  expect(
    framePicture(
      stations.map((s) => ({ ...s, mtf50: null })),
      size,
    ),
  ).toBeNull();
});

// SVG 1.1, 8.3.8: an arc whose ends coincide is left out, so a full ring must stop short.
test.each([0, 0.25, 0.5, 1, 1.7])(
  'an arc over %d of the circle never closes on itself',
  (share) => {
    const numbers = arcPath(100, 100, 50, share)
      .match(/-?\d+(\.\d+)?/g)!
      .map(Number);
    const [x0, y0] = numbers;
    const [x1, y1] = numbers.slice(-2);
    expect(Math.hypot(x1! - 100, y1! - 100)).toBeCloseTo(50, 1);
    if (share > 0) expect([x1, y1]).not.toEqual([x0, y0]);
  },
);

test('words at curves do not lie on each other', () => {
  const area = { left: 0, right: 300, top: 0, bottom: 200 };
  const lines = [40, 60, 160].map((y) => ({
    label: 'weakest corner',
    points: Array.from({ length: 30 }, (_, i) => [i * 10, y + i * 0.5] as const),
  }));
  const placed = placeLabels(lines, area, 12);
  const boxes = placed.map(({ x, y, anchor }) => {
    const width = 14 * 12 * 0.56;
    const left = anchor === 'start' ? x : x - width;
    return { left, right: left + width, top: y - 10, bottom: y + 3 };
  });
  for (const [i, a] of boxes.entries()) {
    for (const b of boxes.slice(i + 1)) {
      const apart =
        a.right <= b.left || b.right <= a.left || a.bottom <= b.top || b.bottom <= a.top;
      expect(apart).toBe(true);
    }
  }
});

test('64 bins are 64 bars at most, none higher than the place for them', () => {
  const html = renderToStaticMarkup(<Histogram bins={histogram} />);
  const bars = [...html.matchAll(/M\d+ 1v-([\d.]+)h/g)].map((match) => Number(match[1]));
  expect(bars.length).toBeGreaterThan(40);
  expect(Math.max(...bars)).toBe(1);
});
