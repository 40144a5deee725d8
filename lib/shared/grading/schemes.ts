import type { ModelClass } from '../words';
import type { Limits, Rule, Scheme } from './scheme';
import compacts from './small-sensor-compacts.json' with { type: 'json' };

const smallSensor = compacts as unknown as Scheme;

/** What differs from small-sensor compacts: limits, and why. */
type Difference = Record<string, { limits: Record<'A' | 'B' | 'C', Limits>; reason: string }>;

const largeSensor: Difference = {
  sharpness: {
    limits: { A: [0.2, null], B: [0.16, null], C: [0.11, null] },
    reason: 'Lenses of this class draw sharper than a small zoom (common practice).',
  },
  noise: {
    limits: { A: [32, null], B: [27, null], C: [22, null] },
    reason: 'ISO 12232’s first excellent ratio of 40 is 32 dB; a large sensor reaches it at base.',
  },
  white: {
    limits: { A: [null, 4], B: [null, 8], C: [null, 13] },
    reason: 'Within ISO 19264-1’s middle level; the class has the better white balance.',
  },
};

const interchangeable: Difference = {
  ...largeSensor,
  corners: {
    limits: { A: [55, null], B: [42, null], C: [30, null] },
    reason: 'The corners are the test lens’s more than the body’s, so they weigh less.',
  },
  evenness: {
    limits: { A: [null, 18], B: [null, 35], C: [null, 60] },
    reason: 'Four unlike corners on a known good lens show a mount or sensor out of square.',
  },
};

function derived(base: Scheme, scheme: Omit<Scheme, 'rules' | 'risk'>, by: Difference): Scheme {
  const rules = base.rules.map((rule): Rule => ({ ...rule, ...by[rule.id] }));
  return { ...scheme, risk: base.risk, rules };
}

/** The schemes that a shop starts with, one a class of camera. */
export const defaultSchemes: Readonly<Record<ModelClass, Scheme>> = {
  'small-sensor-compact': smallSensor,
  'large-sensor-compact': derived(
    smallSensor,
    {
      id: 'large-sensor-compacts',
      name: 'Large-sensor compacts',
      version: 1,
      modelClass: 'large-sensor-compact',
    },
    largeSensor,
  ),
  'interchangeable-lens': derived(
    smallSensor,
    {
      id: 'interchangeable-lenses',
      name: 'Interchangeable-lens cameras',
      version: 1,
      modelClass: 'interchangeable-lens',
    },
    interchangeable,
  ),
};
