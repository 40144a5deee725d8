'use client';

import { createContext, type ReactNode, useCallback, useContext, useRef, useState } from 'react';

interface Message {
  id: number;
  text: string;
  tone: 'plain' | 'want';
}
type Say = (text: string, tone?: Message['tone']) => void;

const SayContext = createContext<Say>(() => {});

/** `const say = useToast(); say('Saved.')` */
export function useToast(): Say {
  return useContext(SayContext);
}

const shownFor = 6000;

/** Short news at the foot of the screen, spoken politely; errors stay until they are closed. */
export function ToastProvider({ children }: { children: ReactNode }) {
  const [messages, setMessages] = useState<Message[]>([]);
  const nextId = useRef(0);
  const close = useCallback(
    (id: number) => setMessages((all) => all.filter((message) => message.id !== id)),
    [],
  );
  const say = useCallback<Say>(
    (text, tone = 'plain') => {
      nextId.current += 1;
      const id = nextId.current;
      setMessages((all) => [...all.slice(-2), { id, text, tone }]);
      if (tone === 'plain') setTimeout(() => close(id), shownFor);
    },
    [close],
  );
  return (
    <SayContext value={say}>
      {children}
      <div
        aria-live="polite"
        className="pointer-events-none fixed inset-x-3 bottom-4 z-50 grid justify-items-center gap-2"
      >
        {messages.map(({ id, text, tone }) => (
          <div
            key={id}
            className={
              tone === 'plain'
                ? 'pointer-events-auto flex items-center gap-3 rounded-full bg-ink py-2 pr-2 pl-4 text-sheet'
                : 'pointer-events-auto flex items-center gap-3 rounded-full bg-light py-2 pr-2 pl-4 text-light-on'
            }
          >
            {text}
            <button
              type="button"
              className="min-h-7 rounded-full px-2.5 text-[13px] font-semibold underline underline-offset-2 outline-current"
              onClick={() => close(id)}
            >
              Close
            </button>
          </div>
        ))}
      </div>
    </SayContext>
  );
}
