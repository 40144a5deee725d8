import { Panel } from '@/components/ui/panel';

const cautions = [
  [
    'Batteries out first.',
    'Lithium cells that are swollen, dented or hot leave the bench: never open, charge or press them.',
  ],
  [
    'The flash capacitor can hold some 300 V after that.',
    'Discharge it through a resistor and measure before you touch anything near it.',
  ],
  [
    'A mains oscilloscope’s earth clip is earth.',
    'Clip it only to the camera’s ground, with the camera on its battery and on nothing else.',
  ],
  [
    'Fine conductors in flat cables crack when creased.',
    'Open the latch before you pull, and never fold a cable tighter than it came.',
  ],
] as const;

/** Stands where a camera is about to be opened. */
export function Cautions() {
  return (
    <Panel aria-label="Before you open it">
      <details>
        <summary className="flex items-baseline gap-2.5">
          <span aria-hidden="true" className="size-2.5 shrink-0 rounded-full bg-light" />
          <span>
            <b>Before you open it:</b> batteries out, then discharge the flash and measure.
          </span>
        </summary>
        <ol className="mt-3 grid gap-2.5 pl-5">
          {cautions.map(([title, text]) => (
            <li key={title}>
              <b>{title}</b> <span className="text-ink-2">{text}</span>
            </li>
          ))}
          <li className="text-ink-2">
            Follow the maker’s service instructions, local rules and, where required, licensed
            practice.
          </li>
        </ol>
      </details>
    </Panel>
  );
}
