import { Chip } from '@/components/ui/chip';
import { type UnitState, unitStateWords } from '@/lib/shared/words';

/** States that wait for somebody's hand. */
const wanting = new Set<UnitState>(['awaiting-grade', 'returned']);

export function StateChip({ state }: { state: UnitState }) {
  return <Chip tone={wanting.has(state) ? 'want' : 'plain'}>{unitStateWords[state]}</Chip>;
}
