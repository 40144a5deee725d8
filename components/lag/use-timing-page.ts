'use client';

import { type RefObject, useEffect, useState } from 'react';
import { cycleFrames } from '@/analysis/time/timing-page';
import { drawFrame, drawGround } from './draw-page';
import { framesPassed, intervalsWanted, measureScreen, type ScreenTime } from './frame-time';

export interface PageState {
  /** Null while it is being measured. */
  readonly screen: ScreenTime | null;
  readonly tooSlow: boolean;
  /** Frames that the browser left out in the last cycle. */
  readonly leftOut: number;
}

const unmeasured: PageState = { screen: null, tooSlow: false, leftOut: 0 };

/** Measures the screen, then draws every frame of it on the two canvases until it is stopped. */
export function useTimingPage(
  ground: RefObject<HTMLCanvasElement | null>,
  moving: RefObject<HTMLCanvasElement | null>,
  running: boolean,
): PageState {
  const [state, setState] = useState<PageState>(unmeasured);
  const screen = state.screen;

  useEffect(() => {
    const canvas = ground.current;
    if (!canvas) return;
    const draw = () => {
      const size = sizeOf(canvas);
      const pen = canvas.getContext('2d');
      if (pen) drawGround(pen, size, screen?.frameTime ?? null);
    };
    draw();
    // The words are drawn again once their face is there.
    document.fonts.ready.then(draw);
    const observer = new ResizeObserver(draw);
    observer.observe(canvas);
    return () => observer.disconnect();
  }, [ground, screen]);

  useEffect(() => {
    if (!running || screen) return;
    return measureIntervals((intervals) => {
      const measured = measureScreen(intervals);
      setState({ screen: measured, tooSlow: measured === null, leftOut: 0 });
    });
  }, [running, screen]);

  useEffect(() => {
    const canvas = moving.current;
    const pen = canvas?.getContext('2d');
    if (!running || !screen || !canvas || !pen) return;
    const { frameTime } = screen;
    const size = () => sizeOf(canvas);
    return countFrames(
      screen,
      (frame) => drawFrame(pen, size(), frame, frameTime),
      (leftOut) => setState((now) => ({ ...now, leftOut })),
    );
  }, [moving, running, screen]);

  return state;
}

/** Makes the canvas as fine as the screen; does nothing while it is. */
function sizeOf(canvas: HTMLCanvasElement): number {
  const size = Math.max(1, Math.round(canvas.clientWidth * window.devicePixelRatio));
  if (canvas.width !== size) {
    canvas.width = size;
    canvas.height = size;
  }
  return size;
}

function measureIntervals(done: (intervals: number[]) => void): () => void {
  const intervals: number[] = [];
  let last: number | null = null;
  let request = requestAnimationFrame(function look(now) {
    if (last !== null) intervals.push(now - last);
    last = now;
    if (intervals.length >= intervalsWanted) done(intervals);
    else request = requestAnimationFrame(look);
  });
  return () => cancelAnimationFrame(request);
}

/** Frames are counted, not timed: where the browser leaves some out, the count goes on by as many, so that the hand keeps time. */
function countFrames(
  { refresh, every, frameTime }: ScreenTime,
  show: (frame: number) => void,
  tellLeftOut: (count: number) => void,
): () => void {
  const cycle = cycleFrames(frameTime) * every;
  let count = 0;
  let leftOut = 0;
  let last: number | null = null;
  let request = requestAnimationFrame(function next(now) {
    const passed = last === null ? 0 : framesPassed(now - last, refresh);
    last = now;
    leftOut += Math.max(0, passed - 1);
    count += passed;
    if (count >= cycle) {
      count %= cycle;
      tellLeftOut(leftOut);
      leftOut = 0;
    }
    show(Math.floor(count / every));
    request = requestAnimationFrame(next);
  });
  return () => cancelAnimationFrame(request);
}
