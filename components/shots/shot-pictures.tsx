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
  edgeFinding,
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
  const [sharpness, edges, fringes, exposure, colour] = [
    sharpnessFinding,
    edgeFinding,
    fringeFinding,
    exposureFinding,
    colourFinding,
  ].map((finding) => finding(readings));
  const frame = plots.stations?.length ? framePicture(plots.stations, analysis) : null;
  const curves = tellingCurves(plots.stations ?? []).map((curve) => ({
    ...curve,
    label: placeName(curve.id).toLowerCase(),
  }));
  return (
    <div className="gap-3.5 md:columns-2 2xl:columns-3">
      {frame ? (
        <Shown title={sharpness?.title ?? 'Sharpness over the frame'} detail={sharpness?.detail}>
          <FrameMap frame={frame} />
          {fringes ? (
            <p className="mt-3 text-pretty text-ink-2">
              <b className="text-ink">{fringes.title}.</b> {fringes.detail}
            </p>
          ) : null}
        </Shown>
      ) : null}
      {curves.length > 0 ? (
        <Shown title={edges?.title ?? 'Edges'} detail={edges?.detail}>
          <MtfCurves curves={curves} />
        </Shown>
      ) : null}
      <Shown title={exposure?.title ?? 'Light by channel'} detail={exposure?.detail}>
        <ChannelHistogram plots={plots} />
      </Shown>
      {plots.colours?.length ? (
        <Shown title={colour?.title ?? 'Colours'} detail={colour?.detail}>
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

function Shown({
  title,
  detail,
  children,
}: {
  title: string;
  detail?: string;
  children: ReactNode;
}) {
  return (
    <Panel className="mb-3.5 break-inside-avoid">
      <PanelHead title={title} className={detail ? 'mb-1' : undefined} />
      {detail ? <p className="mb-3 text-pretty text-ink-2">{detail}</p> : null}
      {children}
    </Panel>
  );
}
