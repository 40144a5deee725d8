import 'server-only';
import { quantities } from '@/analysis/quantities';
import type { StationPlot } from '@/analysis/result';
import { combineRepeats } from '@/analysis/statistics/combine';
import { median } from '@/analysis/statistics/outliers';
import { withDoubt } from '@/lib/shared/numbers';
import type { FramePicture, ReportContent, ReportMeasurement } from '@/lib/shared/report';
import { cautions } from '@/lib/shared/report-topics';
import { reportWords } from '@/lib/shared/report-words';
import { functionCheckItems, modelClassWords } from '@/lib/shared/words';
import type { Analysis } from '@/models/testing';
import { cleaned, serialEnding } from './report-cleaning';
import type { ReportFacts } from './report-facts';
import { labelOf, peerValues, sampleKey } from './results';

export const cornerStations = ['NW', 'NE', 'SW', 'SE'];

/** Everything that a published report shows, from what is known of the unit; free text is cleaned of what may not be public. */
export function reportContent(
  facts: ReportFacts,
  frame: Pick<ReportContent, 'slug' | 'version' | 'publishedAt' | 'pictures'>,
): ReportContent {
  const { unit, grade, run, shots, best, rules, checks, shop } = facts;
  const weakest = weakestCorner(best);
  const checkLines = checks.map(({ label, outcome, note }) => ({ label, outcome, note }));
  const words = reportWords({
    letter: grade.letter,
    rules,
    checks: checkLines,
    unchecked: functionCheckItems.length - checks.length,
    weakest,
  });
  const cornersWeak = rules.some(
    (rule) => ['corners', 'evenness'].includes(rule.ruleId) && rule.allows !== 'A',
  );
  const weakStation = cornersWeak ? (weakest?.station ?? null) : null;
  const content: ReportContent = {
    format: 'mendlight-report',
    formatVersion: 1,
    slug: frame.slug,
    version: frame.version,
    publishedAt: frame.publishedAt,
    shop: { name: shop.name },
    unit: {
      tag: unit.tag,
      maker: unit.maker,
      model: unit.model,
      modelClass: modelClassWords[unit.modelClass],
      serialEnding: serialEnding(unit.serial),
      accessories: unit.accessories,
    },
    grade: {
      letter: grade.letter,
      overridden: grade.letter !== grade.proposed,
      reason: grade.reason,
      signedByBenchWorker: grade.ownWork,
      schemeName: grade.schemeName,
      schemeVersion: grade.schemeVersion,
    },
    ...words,
    repair: facts.repair,
    checks: checkLines,
    rules: [...rules],
    measurements: measurementsOf(facts),
    frame: framePicture(best, facts, weakStation),
    curves: curvesOf(best, weakest?.station ?? null, weakStation),
    tone: (best.plots.tone ?? []).map(({ reflectance, code, used }) => ({
      reflectance,
      code,
      used,
    })),
    colours: (best.plots.colours ?? []).map((colour) => ({
      id: colour.id,
      kind: colour.kind,
      reference: colour.reference,
      measured: colour.measured,
      deltaE2000: colour.deltaE2000,
      rgb: colour.measuredRgb,
    })),
    histogram: best.plots.histogram,
    pictures: frame.pictures,
    capture: {
      testedOn: testedOn(best, run.startedAt),
      shots: shots.length,
      targetShots: shots.filter((shot) => shot.kind === 'target').length,
      settings: settingsOf(best),
      print: best.registration ? `Target ${best.registration.target.replace('x', ':')}` : '',
    },
    // Numbered instead of named: a file's name may say more than a buyer should read.
    originals: shots.map(({ sha256, bytes }, index) => ({
      name: `Photograph ${index + 1}`,
      sha256,
      bytes,
    })),
    cautions: [...cautions],
    analysisVersion: best.version,
  };
  return cleaned(content, { serial: unit.serial, names: facts.staff });
}

/** The corner that draws softest in this photograph, and its share of the middle. */
export function weakestCorner(analysis: Analysis): { station: string; share: number } | null {
  const stations = analysis.plots.stations ?? [];
  const middle = stations.find((station) => station.id === 'C')?.mtf50;
  const corners = stations
    .flatMap(({ id, mtf50 }) => (cornerStations.includes(id) && mtf50 ? [{ id, mtf50 }] : []))
    .toSorted((a, b) => a.mtf50 - b.mtf50);
  const worst = corners[0];
  return middle && worst ? { station: worst.id, share: worst.mtf50 / middle } : null;
}

/** Whole-frame quantities and the groups of stations; single stations are in the frame's picture. */
function measurementsOf({ samples }: ReportFacts): ReportMeasurement[] {
  const zones: (string | null)[] = [null, 'centre', 'partway', 'corners'];
  const order = [...quantities.keys()];
  return [...samples.values()]
    .filter((sample) => sample.edge === null && zones.includes(sample.zone))
    .toSorted((a, b) => order.indexOf(a.name) - order.indexOf(b.name))
    .map((sample) => {
      const { mean, expanded, n } = combineRepeats(sample.repeats);
      const { name, zone, unit } = sample;
      return {
        name,
        zone,
        label: labelOf(sample),
        source: quantities.get(name)?.source ?? 'common practice',
        text: withDoubt(mean, expanded, unit, quantities.get(name)?.decimals),
        value: mean,
        expanded,
        unit,
        n,
      };
    });
}

/** Peers close the rings where there are enough of them; otherwise this camera's own middle does. */
const enoughPeers = 3;

function framePicture(
  { width, height, plots }: Analysis,
  { peers }: ReportFacts,
  weakStation: string | null,
): FramePicture | null {
  const stations = plots.stations ?? [];
  const others = peerValues(peers, sampleKey('sharpness.mtf50', 'centre', null));
  const own = stations.find((station) => station.id === 'C')?.mtf50;
  const byPeers = others.length >= enoughPeers;
  const fullCircle = byPeers ? median(others) : own;
  if (!fullCircle) return null;
  return {
    width,
    height,
    fullCircle,
    fullCircleMeans: byPeers ? 'peers' : 'centre',
    stations: stations.map(({ id, x, y, mtf50, red, blue }) => ({
      id,
      x,
      y,
      mtf50,
      red,
      blue,
      weak: id === weakStation,
    })),
  };
}

function curvesOf(
  { plots }: Analysis,
  weakest: string | null,
  weakStation: string | null,
): ReportContent['curves'] {
  const shown = [
    { id: 'C', label: 'middle' },
    ...(weakest ? [{ id: weakest, label: 'weakest corner' }] : []),
  ];
  return shown.flatMap(({ id, label }) => {
    const station = plots.stations?.find((candidate) => candidate.id === id);
    const curve = station && meanCurve(station);
    return curve ? [{ label, weak: id === weakStation, ...curve }] : [];
  });
}

/** Mean response over a station's edges, on the first edge's frequencies. */
function meanCurve({ curves }: StationPlot): { frequency: number[]; response: number[] } | null {
  const first = curves[0];
  if (!first) return null;
  const alike = curves.filter((curve) => curve.response.length === first.response.length);
  const response = first.response.map(
    (_, i) => alike.reduce((sum, curve) => sum + (curve.response[i] ?? 0), 0) / alike.length,
  );
  return { frequency: first.frequency, response };
}

/** The camera's own clock may be wrong; a time before the run by years would mislead, so the run's day is the fallback. */
function testedOn(best: Analysis, startedAt: Date): string {
  const day = startedAt.toISOString().slice(0, 10);
  const taken = best.capture.takenAt?.slice(0, 10) ?? '';
  const apart = Math.abs(Date.parse(taken) - startedAt.getTime());
  return apart < 7 * 24 * 60 * 60 * 1000 ? taken : day;
}

/** "1/60 s, f/2.8, ISO 80, 6.2 mm": what the file says. */
function settingsOf({ capture }: Analysis): string {
  const { exposureTime: t, fNumber, iso, focalLength } = capture;
  const parts = [
    t && (t < 0.4 ? `1/${Math.round(1 / t)} s` : `${Number(t.toFixed(1))} s`),
    fNumber && `f/${Number(fNumber.toFixed(1))}`,
    iso && `ISO ${iso}`,
    focalLength && `${Number(focalLength.toFixed(1))} mm`,
  ];
  return parts.filter(Boolean).join(', ');
}
