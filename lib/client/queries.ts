'use client';

import { keepPreviousData, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import type {
  GradingRow,
  InvitationRow,
  MemberRow,
  Page,
  Proposal,
  ReportRow,
  RunDetail,
  SessionRow,
  ShotDetail,
  UnitDetail,
  UnitRow,
} from '@/lib/shared/api';
import { call } from './api';
import { unitsPath } from './units-path';

export interface People {
  members: MemberRow[];
  invitations: InvitationRow[];
}

export function useUnits(search: string, initialData?: Page<UnitRow>) {
  return useQuery({
    queryKey: ['units', search],
    queryFn: () => call<Page<UnitRow>>(unitsPath(search)),
    initialData,
    placeholderData: keepPreviousData,
  });
}

export function useUnit(initialData: UnitDetail) {
  return useQuery({
    queryKey: ['unit', initialData.tag],
    queryFn: () => call<UnitDetail>(`/api/units/${initialData.tag}`),
    initialData,
  }).data;
}

/** Polls only while something is being analysed and no event stream is open. */
export function useRun(initialData: RunDetail, poll: boolean) {
  return useQuery({
    queryKey: ['run', initialData.id],
    queryFn: () => call<RunDetail>(`/api/runs/${initialData.id}`),
    initialData,
    refetchInterval: poll ? 2500 : false,
  }).data;
}

export function useShot(id: string | null, initialData?: ShotDetail) {
  return useQuery({
    queryKey: ['shot', id],
    queryFn: () => call<ShotDetail>(`/api/shots/${id}`),
    enabled: id !== null,
    initialData: initialData?.id === id ? initialData : undefined,
    placeholderData: keepPreviousData,
    refetchInterval: (query) => {
      const state = query.state.data?.state;
      return state === 'queued' || state === 'analysing' ? 2500 : false;
    },
  });
}

export function useGradingQueue(initialData: GradingRow[]) {
  return useQuery({
    queryKey: ['grading'],
    queryFn: () => call<GradingRow[]>('/api/grading'),
    initialData,
  }).data;
}

export function useProposal(tag: string, initialData: Proposal | null) {
  return useQuery({
    queryKey: ['proposal', tag],
    queryFn: () => call<Proposal | null>(`/api/units/${tag}/proposal`),
    initialData,
  }).data;
}

export function useReports(initialData: ReportRow[]) {
  return useQuery({
    queryKey: ['reports'],
    queryFn: () => call<ReportRow[]>('/api/reports'),
    initialData,
  }).data;
}

export function usePeople(initialData: People) {
  return useQuery({
    queryKey: ['people'],
    queryFn: () => call<People>('/api/members'),
    initialData,
  }).data;
}

export function useSessions(initialData: SessionRow[]) {
  return useQuery({
    queryKey: ['sessions'],
    queryFn: () => call<SessionRow[]>('/api/sessions'),
    initialData,
  }).data;
}

/** A change: one call, then everything that it may have touched is read anew. */
export function useChange<Input, Output = unknown>(
  change: (input: Input) => Promise<Output>,
  touches: readonly string[],
) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSuccess: () =>
      Promise.all(touches.map((key) => client.invalidateQueries({ queryKey: [key] }))),
  });
}
