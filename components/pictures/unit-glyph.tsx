import type { ModelClass } from '@/lib/shared/words';

/** A plain drawing of a camera of a class, made of the target's discs, for a unit that has no picture yet. */
export function UnitGlyph({
  modelClass,
  size = 48,
  className,
}: {
  modelClass: ModelClass;
  size?: number;
  className?: string;
}) {
  const lens = {
    'small-sensor-compact': 9,
    'large-sensor-compact': 12,
    'interchangeable-lens': 15,
  }[modelClass];
  return (
    <svg
      viewBox="0 0 64 48"
      width={size}
      height={(size * 3) / 4}
      aria-hidden="true"
      className={className}
      fill="none"
      stroke="currentColor"
      strokeWidth={2}
    >
      <path d={bodies[modelClass]} strokeLinejoin="round" />
      <circle cx={32} cy={27} r={lens} />
      <circle cx={32} cy={27} r={lens * 0.5} />
      <circle cx={13} cy={18} r={2} fill="currentColor" stroke="none" />
    </svg>
  );
}

const bodies: Record<ModelClass, string> = {
  'small-sensor-compact':
    'M7 12H57a3 3 0 0 1 3 3V38a3 3 0 0 1-3 3H7a3 3 0 0 1-3-3V15a3 3 0 0 1 3-3Z',
  'large-sensor-compact':
    'M7 11H44l3-4h8l2 4a3 3 0 0 1 3 3V40a3 3 0 0 1-3 3H7a3 3 0 0 1-3-3V14a3 3 0 0 1 3-3Z',
  'interchangeable-lens':
    'M7 13H20l5-8H39l5 8H57a3 3 0 0 1 3 3V41a3 3 0 0 1-3 3H7a3 3 0 0 1-3-3V16a3 3 0 0 1 3-3Z',
};
