import { Panel } from '@/components/ui/panel';
import { LoadingLines } from '@/components/ui/states';

export default function ShopLoading() {
  return (
    <>
      <div className="h-[58px] px-1 py-1.5" />
      <Panel>
        <LoadingLines lines={8} />
      </Panel>
    </>
  );
}
