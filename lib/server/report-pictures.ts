import 'server-only';
import sharp from 'sharp';
import { placeWords } from '@/lib/shared/places';
import type { ReportContent } from '@/lib/shared/report';
import type { DerivedPicture } from '@/models/testing';
import { weakestCorner } from './report-content';
import type { ReportFacts } from './report-facts';
import { getBytes, putBytes } from './storage';

type Shown = ReportContent['pictures'][number];
type Stored = { name: string; key: string; mediaType: string };

/** Copies the pictures that a report shows to keys of their own, re-encoded, so that no metadata can come along. */
export async function copyPictures(
  { best, unit }: ReportFacts,
  slug: string,
  version: number,
): Promise<{ shown: Shown[]; stored: Stored[] }> {
  const camera = `${unit.maker} ${unit.model}`;
  const weakest = weakestCorner(best)?.station;
  const corner = weakest ? placeWords[weakest] : undefined;
  const wanted = [
    {
      from: 'view',
      name: 'view',
      label: 'The test target as this camera saw it',
      alt: `The printed test target, photographed with this ${camera}`,
    },
    {
      from: 'crop-C',
      name: 'middle',
      label: 'Middle',
      alt: 'A dark square on grey from the middle of the picture, at full size',
    },
    {
      from: `crop-${weakest}`,
      name: 'weakest-corner',
      label: corner ? `Weakest corner, ${corner}` : 'Weakest corner',
      alt: `The same square in the ${corner ?? 'weakest'} corner, at full size`,
    },
  ];
  const shown: Shown[] = [];
  const stored: Stored[] = [];
  for (const { from, name, label, alt } of wanted) {
    const source = best.pictures.find((picture) => picture.name === from);
    if (!source) continue;
    const { data, info } = await reencoded(source);
    const key = `report/${slug}/${version}/${name}`;
    await putBytes(key, data, source.mediaType);
    shown.push({ name, label, alt, width: info.width, height: info.height });
    stored.push({ name, key, mediaType: source.mediaType });
  }
  return { shown, stored };
}

/** From pixels, in the kind it was: crops stay JPEG with full chroma, so that no fringe is added or lost. */
async function reencoded(source: DerivedPicture) {
  const picture = sharp(await getBytes(source.key));
  const encoded =
    source.mediaType === 'image/webp'
      ? picture.webp({ quality: 84, effort: 4 })
      : picture.jpeg({ quality: 95, chromaSubsampling: '4:4:4' });
  return encoded.toBuffer({ resolveWithObject: true });
}
