import { ButtonLink } from '@/components/ui/button';
import { Panel } from '@/components/ui/panel';
import { EmptyState } from '@/components/ui/states';

export default function ShopNotFound() {
  return (
    <Panel>
      <EmptyState
        title="There is nothing here"
        action={
          <ButtonLink href="/bench" variant="ink">
            All units
          </ButtonLink>
        }
      >
        Your shop has no unit, run or picture of that name. Search the bench by tag, model or serial
        number.
      </EmptyState>
    </Panel>
  );
}
