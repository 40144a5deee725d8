import { demoPassword, demoPeople } from '@/lib/shared/demo';
import { Tag } from '../ui/chip';

/** The demo shop's people, shown in local mode only. */
export function DemoPeople() {
  return (
    <section className="border-line-2 border-t pt-4">
      <h2 className="text-[15px]">Demo shop on this machine</h2>
      <p className="mt-1 text-[13.5px] text-ink-2">
        Everyone’s password is <Tag className="font-medium text-ink">{demoPassword}</Tag>
      </p>
      <dl className="mt-2 grid grid-cols-[auto_1fr] gap-x-4 gap-y-1 text-[14px]">
        {demoPeople.map(({ email, role }) => (
          <div key={email} className="contents">
            <dt className="text-ink-2">{role}</dt>
            <dd>
              <Tag>{email}</Tag>
            </dd>
          </div>
        ))}
      </dl>
    </section>
  );
}
