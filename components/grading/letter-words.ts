import type { Letter } from '@/lib/shared/words';

export const letterWords: Record<Letter, string> = { A: 'A', B: 'B', C: 'C', Parts: 'Parts only' };
