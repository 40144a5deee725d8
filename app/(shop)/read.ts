import { notFound } from 'next/navigation';
import { UserError } from '@/lib/shared/errors';

/** A page's first read: what isn't there shows the page that says so. */
export async function read<T>(reading: Promise<T>): Promise<T> {
  try {
    return await reading;
  } catch (error) {
    if (error instanceof UserError && error.code === 'notFound') notFound();
    throw error;
  }
}
