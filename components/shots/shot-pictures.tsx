import type { ReactNode } from 'react';
import { AbPlane } from '@/components/pictures/ab-plane';
import { placeName } from '@/components/pictures/draw';
import { framePicture } from '@/components/pictures/frame-data';
import { FrameMap } from '@/components/pictures/frame-map';
import { MtfCurves } from '@/components/pictures/mtf-curves';
import { ShadingMap } from '@/components/pictures/shading-map';
import { ToneCurve } from '@/components/pictures/tone-curve';
import { colourPoints, tellingCurves } from '@/components/runs/run-pictures';
import { Panel, PanelHead } from '@/components/ui/panel';
import type { ShotDetail } from '@/lib/shared/api';
import {
  colourFinding,
  exposureFinding,
  fringeFinding,
  readingsOfShot,
  sharpnessFinding,
} from '@/lib/shared/findings';
import { ChannelHistogram } from './channel-histogram';

/** The family of pictures for one shot; each appears only if the shot could give it. */
export function ShotPictures({ analysis }: { analysis: NonNullable<ShotDetail['analysis']> }) {
  const { plots } = analysis;
  const readings = readingsOfShot(analysis.metrics);
  const frame = plots.stations?.length ? framePicture(plots.stations, analysis) : null;
  const curves = tellingCurves(plots.stations ?? []).map((curve) => ({
    ...curve,
    label: placeName(curve.id).toLowerCase(),
  }));
  return (
    <div className="grid items-start gap-3.5 md:grid-cols-2 2xl:grid-cols-3">
      {frame ? (
        <Shown title={sharpnessFinding(readings)?.title ?? 'Sharpness over the frame'}>
          <FrameMap frame={frame} />
        </Shown>
      ) : null}
      {curves.length > 0 ? (
        <Shown title={fringeFinding(readings)?.title ?? 'Edges'}>
          <MtfCurves curves={curves} />
        </Shown>
      ) : null}
      <Shown title={exposureFinding(readings)?.title ?? 'Light by channel'}>
        <ChannelHistogram plots={plots} />
      </Shown>
      {plots.colours?.length ? (
        <Shown title={colourFinding(readings)?.title ?? 'Colours'}>
          <AbPlane colours={colourPoints(plots.colours)} />
        </Shown>
      ) : null}
      {plots.tone?.length ? (
        <Shown title="How greys are drawn">
          <ToneCurve tone={plots.tone} />
        </Shown>
      ) : null}
      {plots.shading ? (
        <Shown title="Light over the frame">
          <ShadingMap shading={plots.shading} aspect={analysis.width / analysis.height} />
        </Shown>
      ) : null}
    </div>
  );
}

function Shown({ title, children }: { title: string; children: ReactNode }) {
  return (
    <Panel>
      <PanelHead title={title} />
      {children}
    </Panel>
  );
}
