'use client';

import {
  createContext,
  type ReactNode,
  use,
  useCallback,
  useEffect,
  useMemo,
  useRef,
  useState,
} from 'react';

export interface Shortcut {
  /** As KeyboardEvent.key says it: "g", "/", "ArrowLeft", "Enter". */
  key: string;
  label: string;
  run: () => void;
}

interface Registry {
  add(list: readonly Shortcut[]): () => void;
  all(): Shortcut[];
  enabled: boolean;
  setEnabled(on: boolean): void;
}

const Context = createContext<Registry | null>(null);
const stored = 'mendlight.keys';

/** True where a key press is text or drives the control under it. */
export function typesInto(target: EventTarget | null): boolean {
  if (!(target instanceof HTMLElement)) return false;
  return target.isContentEditable || /^(INPUT|TEXTAREA|SELECT)$/.test(target.tagName);
}

/** Keys of the open page; one listener, so that `?` can list what works here. */
export function ShortcutProvider({ children }: { children: ReactNode }) {
  const lists = useRef(new Set<readonly Shortcut[]>());
  const [enabled, setOn] = useState(true);
  useEffect(() => setOn(localStorage.getItem(stored) !== 'off'), []);
  const setEnabled = useCallback((on: boolean) => {
    localStorage.setItem(stored, on ? 'on' : 'off');
    setOn(on);
  }, []);
  useEffect(() => {
    if (!enabled) return;
    const press = (event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey || event.defaultPrevented) return;
      if (typesInto(event.target) || document.querySelector('[role=dialog]')) return;
      const shortcut = [...lists.current].flat().findLast((s) => s.key === event.key);
      if (!shortcut) return;
      event.preventDefault();
      shortcut.run();
    };
    document.addEventListener('keydown', press);
    return () => document.removeEventListener('keydown', press);
  }, [enabled]);
  const registry = useMemo<Registry>(
    () => ({
      add: (list) => {
        lists.current.add(list);
        return () => lists.current.delete(list);
      },
      all: () => [...lists.current].flat(),
      enabled,
      setEnabled,
    }),
    [enabled, setEnabled],
  );
  return <Context value={registry}>{children}</Context>;
}

export function useShortcutRegistry(): Registry {
  const registry = use(Context);
  if (!registry) throw new Error('Shortcuts need a ShortcutProvider above them.');
  return registry;
}

/** Gives the page these keys while the component stands. The list may change on every render. */
export function useShortcuts(list: readonly Shortcut[]): void {
  const { add } = useShortcutRegistry();
  const latest = useRef(list);
  latest.current = list;
  const names = list.map((s) => `${s.key} ${s.label}`).join('\n');
  useEffect(() => {
    if (names === '') return;
    const standing = latest.current.map((shortcut, i) => ({
      ...shortcut,
      run: () => latest.current[i]?.run(),
    }));
    return add(standing);
  }, [add, names]);
}
