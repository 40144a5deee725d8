'use client';

import Link from 'next/link';
import { useEffect, useRef, useState } from 'react';
import { personUncertainty, readingUncertainty } from '@/analysis/time/lag';
import { Wordmark } from '../pictures/mark';
import { Button } from '../ui/button';
import { type PageState, useTimingPage } from './use-timing-page';

/** The timing page with what to do beside it. Its greys are the same in every theme: a program reads them. */
export function TimingScreen() {
  const stage = useRef<HTMLDivElement>(null);
  const ground = useRef<HTMLCanvasElement>(null);
  const moving = useRef<HTMLCanvasElement>(null);
  const [running, setRunning] = useState(false);
  const state = useTimingPage(ground, moving, running);

  // Where less motion is asked for, nothing moves before it is started by hand.
  useEffect(() => setRunning(!matchMedia('(prefers-reduced-motion: reduce)').matches), []);
  useScreenAwake(running);
  useKeys({ ' ': () => setRunning((now) => !now), f: () => fillScreen(stage.current) });

  return (
    <main className="grid min-h-dvh lg:grid-cols-[minmax(0,1fr)_380px]">
      <div ref={stage} className="grid place-items-center bg-[#767676] p-2">
        <div
          role="img"
          aria-label="Timing page: four rings in the corners, a hand that passes the mark at the top every four seconds, and discs that tell a program the time since then"
          className="relative aspect-square w-[min(100%,calc(100dvh-16px),1100px)]"
        >
          <canvas ref={ground} className="absolute inset-0 size-full" />
          <canvas ref={moving} className="absolute inset-0 size-full" />
        </div>
      </div>
      <div className="grid content-start gap-5 bg-panel p-6 max-sm:p-4">
        <Link href="/" className="justify-self-start no-underline">
          <Wordmark size={26} />
        </Link>
        <h1>How long the shutter waits</h1>
        <ol className="grid list-decimal gap-2.5 pl-5">
          <li>
            Put the camera on a stand, square or slanting, so that the four rings nearly fill the
            picture. Focus on the screen; 1/60 s or shorter, no flash.
          </li>
          <li>
            Follow the hand. Press the release right through just as the hand passes the long mark
            at the top.
          </li>
          <li>
            Take five photographs and drop them on the unit’s test run as “timing page”. Their mean
            counts.
          </li>
        </ol>
        <div className="flex flex-wrap gap-2.5">
          <Button hint="Space" onClick={() => setRunning((now) => !now)}>
            {running ? 'Stop' : 'Start'}
          </Button>
          <Button variant="quiet" hint="F" onClick={() => fillScreen(stage.current)}>
            Fill the screen
          </Button>
        </div>
        <div aria-live="polite" className="min-h-[5.8em] text-ink-2">
          <ScreenWords state={state} running={running} />
        </div>
        <p className="text-ink-3 text-sm">
          The hand moves, and discs the size of a coin switch many times a second: that is the
          measurement, and it can’t be shown without. Stop it whenever it troubles you.
        </p>
      </div>
    </main>
  );
}

function ScreenWords({ state, running }: { state: PageState; running: boolean }) {
  const { screen, tooSlow, leftOut } = state;
  if (tooSlow)
    return (
      <p>
        This screen shows fewer than 25 pictures a second, too few to time a shutter by. Use another
        one, or switch off its power saving.
      </p>
    );
  if (!screen)
    return (
      <p>
        {running
          ? 'Measuring the screen: two seconds.'
          : 'Start, and the screen is measured first.'}
      </p>
    );
  const { refresh, frameTime } = screen;
  return (
    <>
      <p>
        This screen’s frame lasts {refresh.toFixed(2)} ms ({(1000 / refresh).toFixed(1)} Hz). One
        photograph tells the lag to {readingUncertainty(frameTime).toFixed(1)} ms, and your hand
        adds some {personUncertainty} ms, standard uncertainty.
      </p>
      {leftOut > 2 ? (
        <p className="mt-2 font-semibold text-light-ink">
          The browser left out {leftOut} frames in the last round. Close other pages and programs.
        </p>
      ) : null}
    </>
  );
}

function fillScreen(stage: HTMLElement | null): void {
  if (document.fullscreenElement) document.exitFullscreen();
  else stage?.requestFullscreen?.();
}

/** Screens that dim themselves spoil the series; where the browser can't help it, nothing is lost. */
function useScreenAwake(running: boolean): void {
  useEffect(() => {
    if (!running || !('wakeLock' in navigator)) return;
    const lock = navigator.wakeLock.request('screen').catch(() => null);
    return () => {
      lock.then((held) => held?.release());
    };
  }, [running]);
}

function useKeys(keys: Record<string, () => void>): void {
  const latest = useRef(keys);
  latest.current = keys;
  useEffect(() => {
    const listen = (event: KeyboardEvent) => {
      const onControl = event.target instanceof HTMLElement && event.target.closest('button, a');
      const action = latest.current[event.key.toLowerCase()];
      if (!action || onControl || event.ctrlKey || event.metaKey || event.altKey) return;
      event.preventDefault();
      action();
    };
    window.addEventListener('keydown', listen);
    return () => window.removeEventListener('keydown', listen);
  }, []);
}
