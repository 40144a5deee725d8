import type { Metadata } from 'next';
import { targets } from '@/analysis/target/target';
import { TargetDrawing } from '@/components/pictures/target-drawing';
import { PageHead, Panel, PanelHead } from '@/components/ui/panel';
import { distanceMetres } from '@/lib/server/print/draw-instructions';
import { papers } from '@/lib/server/print/sheet';
import { requireActor } from '@/lib/server/session';

export const metadata: Metadata = { title: 'Target' };

const focalLengths = [28, 50, 105];
const shapes = [
  { shape: '4x3', title: '4:3, for compacts', note: 'most small and large-sensor compacts' },
  { shape: '3x2', title: '3:2, for system cameras', note: 'most interchangeable-lens cameras' },
] as const;

export default async function TargetsPage() {
  await requireActor();
  return (
    <>
      <PageHead title="Print the target" />
      <p className="max-w-[44em] px-1 text-ink-2">
        One print serves every camera of its shape. Print it at 100&nbsp;% on matte paper; the
        second page says how to check, mount and light it. Each download is a print of its own, with
        its id in its code.
      </p>
      <div className="grid gap-3.5 lg:grid-cols-2">
        {shapes.map(({ shape, title, note }) => (
          <Panel key={shape}>
            <PanelHead title={title} aside={note} />
            <TargetDrawing target={targets[shape]} className="block h-auto w-full rounded-well" />
            <PaperTable shape={shape} />
          </Panel>
        ))}
      </div>
    </>
  );
}

function PaperTable({ shape }: { shape: '4x3' | '3x2' }) {
  const target = targets[shape];
  return (
    <table className="mt-4 w-full text-left tabular-nums">
      <caption className="label pb-2 text-left">
        Distance from lens to print that fills the frame, by focal length (35&nbsp;mm equivalent)
      </caption>
      <thead>
        <tr className="label">
          <th scope="col" className="py-1.5 font-[560]">
            Paper
          </th>
          {focalLengths.map((focal) => (
            <th key={focal} scope="col" className="py-1.5 font-[560]">
              {focal}&nbsp;mm
            </th>
          ))}
          <th scope="col">
            <span className="sr-only">Download</span>
          </th>
        </tr>
      </thead>
      <tbody>
        {Object.keys(papers).map((paper) => (
          <tr key={paper} className="border-line-2 border-t">
            <th scope="row" className="py-2 font-semibold">
              {paper}
            </th>
            {focalLengths.map((focal) => (
              <td key={focal}>
                {distanceMetres(target, target.print[paper]?.mmPerUnit ?? 0, focal).toFixed(2)}
                &nbsp;m
              </td>
            ))}
            <td className="text-right">
              <a
                href={`/api/targets/pdf?shape=${shape}&paper=${paper}`}
                download
                className="inline-flex min-h-9 items-center font-semibold underline"
              >
                PDF
                <span className="sr-only">
                  {' '}
                  of the {shape.replace('x', ':')} target on {paper}
                </span>
              </a>
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
