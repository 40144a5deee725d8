import { type ClassValue, clsx } from 'clsx';
import { twMerge } from 'tailwind-merge';

/** Joins class names; a later one wins over an earlier one of the same kind. */
export function cn(...classes: ClassValue[]): string {
  return twMerge(clsx(classes));
}
