import { quantities } from '@/analysis/quantities';
import type { Metric } from '@/analysis/result';
import { placeName } from '@/components/pictures/draw';
import { Panel, PanelHead } from '@/components/ui/panel';
import { figures, Table, Td, Th } from '@/components/ui/table';
import { withDoubt } from '@/lib/shared/numbers';

/** Every number of the analysis: the frame's own, and folded away those of each place. */
export function MetricTables({ metrics }: { metrics: readonly Metric[] }) {
  const whole = metrics.filter((metric) => !metric.zone);
  const placed = metrics.filter((metric) => metric.zone);
  return (
    <Panel aria-label="All measurements">
      <PanelHead title="Everything measured" aside="doubt: expanded, k = 2, from this shot alone" />
      <MetricTable caption="Of the whole frame" metrics={whole} />
      {placed.length > 0 ? (
        <details className="mt-4">
          <summary className="inline-flex min-h-8 items-center font-semibold underline decoration-line underline-offset-3">
            By place in the picture: {placed.length} values
          </summary>
          <MetricTable caption="By place" metrics={placed} places />
        </details>
      ) : null}
    </Panel>
  );
}

function MetricTable({
  caption,
  metrics,
  places = false,
}: {
  caption: string;
  metrics: readonly Metric[];
  places?: boolean;
}) {
  return (
    <Table>
      <caption className="sr-only">{caption}</caption>
      <thead>
        <tr>
          <Th>Quantity</Th>
          {places ? <Th>Place</Th> : null}
          {places ? <Th>Edges</Th> : null}
          <Th className={figures}>Value and doubt</Th>
          <Th className="max-sm:hidden">Following</Th>
        </tr>
      </thead>
      <tbody>
        {metrics.map((metric) => (
          <MetricRow
            key={`${metric.name} ${metric.zone} ${metric.edge}`}
            metric={metric}
            places={places}
          />
        ))}
      </tbody>
    </Table>
  );
}

function MetricRow({ metric, places }: { metric: Metric; places: boolean }) {
  const quantity = quantities.get(metric.name);
  return (
    <tr>
      <Td className="font-semibold">{quantity?.label ?? metric.name}</Td>
      {places ? <Td>{placeName(metric.zone ?? '')}</Td> : null}
      {places ? <Td>{metric.edge ?? 'all'}</Td> : null}
      <Td className={`${figures} whitespace-nowrap`}>
        {withDoubt(metric.value, 2 * metric.uncertainty, metric.unit, quantity?.decimals ?? 3)}
      </Td>
      <Td className="text-ink-2 max-sm:hidden">{quantity?.source}</Td>
    </tr>
  );
}
