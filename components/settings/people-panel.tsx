'use client';

import { Button } from '@/components/ui/button';
import { Chip } from '@/components/ui/chip';
import { controlClass } from '@/components/ui/field';
import { Panel, PanelHead } from '@/components/ui/panel';
import { call, sentenceOf } from '@/lib/client/api';
import { day } from '@/lib/client/format';
import { type People, useChange, usePeople } from '@/lib/client/queries';
import type { MemberRow } from '@/lib/shared/api';
import { type Role, roles } from '@/lib/shared/words';
import { InviteForm } from './invite-form';

/** Who works here and as what; whoever is shut out keeps their name on what they did. */
export function PeoplePanel({ first, email }: { first: People; email: string }) {
  const { members, invitations } = usePeople(first);
  const change = useChange(
    ({ id, ...patch }: { id: string; role?: Role; active?: boolean }) =>
      call<MemberRow>(`/api/members/${id}`, 'PATCH', patch),
    ['people'],
  );
  return (
    <Panel aria-label="Members">
      <PanelHead title={members.length === 1 ? 'One member' : `${members.length} members`} />
      <ul>
        {members.map((member) => (
          <li
            key={member.id}
            className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2 border-line-2 border-t py-3 first:border-0"
          >
            <span className="min-w-0">
              <b>{member.name}</b> {member.active ? null : <Chip>shut out</Chip>}
              <span className="label block truncate">
                {member.email}
                {member.lastSeenAt ? ` · last here ${day(member.lastSeenAt)}` : ' · never here yet'}
              </span>
            </span>
            <span className="flex items-center gap-2">
              <select
                aria-label={`Role of ${member.name}`}
                value={member.role}
                disabled={!member.active || change.isPending}
                onChange={(event) =>
                  change.mutate({ id: member.id, role: event.target.value as Role })
                }
                className={`${controlClass} w-auto`}
              >
                {roles.map((role) => (
                  <option key={role}>{role}</option>
                ))}
              </select>
              {member.email === email ? (
                <span className="label w-24 text-center">you</span>
              ) : (
                <Button
                  variant="quiet"
                  size="small"
                  className="w-24 whitespace-nowrap px-2"
                  busy={change.isPending && change.variables.id === member.id}
                  onClick={() => change.mutate({ id: member.id, active: !member.active })}
                >
                  {member.active ? 'Shut out' : 'Let in'}
                </Button>
              )}
            </span>
          </li>
        ))}
        {invitations.map((invitation) => (
          <li
            key={invitation.id}
            className="flex flex-wrap justify-between gap-x-4 border-line-2 border-t py-3"
          >
            <span>{invitation.email}</span>
            <span className="label">
              invited as {invitation.role}, open until {day(invitation.expiresAt)}
            </span>
          </li>
        ))}
      </ul>
      {change.isError ? (
        <p role="alert" className="my-2 font-medium text-light-ink">
          {sentenceOf(change.error)}
        </p>
      ) : null}
      <InviteForm />
    </Panel>
  );
}
