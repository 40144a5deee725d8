import { expect, test } from 'vitest';
import type { Capture } from '@/analysis/image';
import { settingsOf } from '@/components/shots/capture-panel';
import { gap } from '@/lib/shared/numbers';

const nothing: Capture = {
  make: null,
  model: null,
  serial: null,
  exposureTime: null,
  fNumber: null,
  iso: null,
  exposureBias: null,
  focalLength: null,
  takenAt: null,
  program: null,
  flash: null,
  software: null,
};

test('settings are said as a photographer says them', () => {
  const capture = {
    ...nothing,
    exposureTime: 0.008,
    fNumber: 5.6,
    iso: 100,
    focalLength: 6.2,
    exposureBias: -0.333,
  };
  expect(settingsOf(capture)).toBe(`1/125${gap}s at f/5.6, ISO 100, 6.2${gap}mm, −0.3${gap}EV`);
});

test('what the file does not tell is left out', () => {
  expect(settingsOf({ ...nothing, iso: 80 })).toBe('ISO 80');
  expect(settingsOf(nothing)).toBe('');
});
