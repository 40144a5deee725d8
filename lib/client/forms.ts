import type { FieldValues, Path, UseFormSetError } from 'react-hook-form';
import type { ApiError } from './api';

/** An empty box is no answer. */
export const optionalText = (typed: unknown) =>
  typeof typed === 'string' && typed.trim() === '' ? undefined : typed;

/** A number box's whole number; undefined when empty, NaN when it holds anything else. */
export function optionalWhole(typed: unknown): unknown {
  if (typeof typed !== 'string') return typed;
  const text = typed.trim();
  if (text === '') return undefined;
  return /^\d+$/.test(text) ? Number(text) : Number.NaN;
}

/** Sets the server's sentence at the field that it speaks of. */
export function showProblem<T extends FieldValues>(
  error: ApiError,
  setError: UseFormSetError<T>,
): void {
  for (const [field, message] of Object.entries(error.fields)) {
    setError(field as Path<T>, { type: 'server', message });
  }
}
