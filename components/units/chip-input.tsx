'use client';

import { useId, useState } from 'react';
import { cn } from '@/components/ui/cn';
import { controlClass } from '@/components/ui/field';

/** Small, as they stand in a report's sentence; the buttons begin them with a capital. */
export const usualAccessories: readonly string[] = [
  'battery',
  'charger',
  'card',
  'strap',
  'lens cap',
  'box',
  'manual',
];

/** A short list put together by touching suggestions or typing one and pressing Enter. */
export function ChipInput({
  label,
  suggestions,
  value,
  onChange,
}: {
  label: string;
  suggestions: readonly string[];
  value: readonly string[];
  onChange: (value: string[]) => void;
}) {
  const [typed, setTyped] = useState('');
  const id = useId();
  const shown = [...suggestions, ...value.filter((item) => !suggestions.includes(item))];
  const toggle = (item: string) =>
    onChange(value.includes(item) ? value.filter((v) => v !== item) : [...value, item]);
  const add = () => {
    const item = typed.trim();
    if (item !== '' && !value.includes(item)) onChange([...value, item]);
    setTyped('');
  };
  return (
    <fieldset className="grid gap-2">
      <legend className="mb-1.5 font-semibold text-[14px]">{label}</legend>
      <div className="flex flex-wrap gap-1.5">
        {shown.map((item) => {
          const on = value.includes(item);
          return (
            <button
              key={item}
              type="button"
              aria-pressed={on}
              onClick={() => toggle(item)}
              className={cn(
                'inline-block min-h-9 rounded-full px-3 text-[14px] first-letter:uppercase focus-visible:rounded-full',
                on ? 'bg-ink font-semibold text-sheet' : 'shadow-[inset_0_0_0_1.5px_var(--line)]',
              )}
            >
              {item}
            </button>
          );
        })}
      </div>
      <label htmlFor={id} className="sr-only">
        Another: {label}
      </label>
      <input
        id={id}
        value={typed}
        maxLength={60}
        placeholder="Something else, then Enter"
        onChange={(event) => setTyped(event.target.value)}
        onBlur={add}
        onKeyDown={(event) => {
          if (event.key !== 'Enter') return;
          event.preventDefault();
          add();
        }}
        className={controlClass}
      />
    </fieldset>
  );
}
