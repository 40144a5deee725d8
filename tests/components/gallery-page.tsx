import { AbPlane } from '@/components/pictures/ab-plane';
import { FrameMap } from '@/components/pictures/frame-map';
import { GradeDial } from '@/components/pictures/grade-dial';
import { Histogram } from '@/components/pictures/histogram';
import { Wordmark } from '@/components/pictures/mark';
import { MtfCurves } from '@/components/pictures/mtf-curves';
import { RegistrationOverlay } from '@/components/pictures/registration-overlay';
import { ScaleLine } from '@/components/pictures/scale-line';
import { ShadingMap } from '@/components/pictures/shading-map';
import { StateDisc } from '@/components/pictures/state-disc';
import { ToneCurve } from '@/components/pictures/tone-curve';
import { UnitGlyph } from '@/components/pictures/unit-glyph';
import { Button } from '@/components/ui/button';
import { Chip, Tag } from '@/components/ui/chip';
import { Choice, FormError, Input, Select, Textarea } from '@/components/ui/field';
import { Key } from '@/components/ui/key';
import { Panel, PanelHead } from '@/components/ui/panel';
import { Progress } from '@/components/ui/progress';
import { EmptyState, ErrorState, LoadingLines } from '@/components/ui/states';
import { Table, Td, Th } from '@/components/ui/table';
import { content, histogram, rules, shading, size, stations } from './fixture';

/** Every primitive and every picture once, to be looked at. */
export function Gallery() {
  return (
    <main className="mx-auto grid max-w-[1240px] gap-4 p-4">
      <Wordmark />
      <h1>Gallery of the look</h1>
      <Primitives />
      <div className="grid gap-4 lg:grid-cols-2">
        <Panel>
          <PanelHead title="The lower right corner is 42 % softer" aside="three shots" />
          {content.frame ? <FrameMap frame={content.frame} /> : null}
        </Panel>
        <Panel>
          <PanelHead title="Edges" />
          <MtfCurves curves={content.curves} />
          <Histogram bins={histogram} />
        </Panel>
        <Panel>
          <PanelHead title="Colours" />
          <AbPlane colours={content.colours} />
        </Panel>
        <Panel>
          <PanelHead title="Tone" />
          <ToneCurve tone={content.tone} />
        </Panel>
        <Panel>
          <PanelHead title="Light" />
          <ShadingMap shading={shading} />
        </Panel>
        <Panel>
          <PanelHead title="Found" />
          <RegistrationOverlay
            {...size}
            src=""
            alt="An empty photograph"
            plots={{ stations, outline: [] }}
          />
        </Panel>
        <Panel>
          <PanelHead title="Scales" />
          {rules.map((rule) => (
            <ScaleLine key={rule.ruleId} data={rule} />
          ))}
        </Panel>
        <Panel>
          <GradeDial letter="B" rules={rules} />
          <GradeDial letter="Parts" rules={rules} size={120} />
          <GradeDial letter={null} rules={[]} size={120} />
          <UnitGlyph modelClass="small-sensor-compact" />
          <UnitGlyph modelClass="large-sensor-compact" />
          <UnitGlyph modelClass="interchangeable-lens" />
        </Panel>
      </div>
    </main>
  );
}

function Primitives() {
  return (
    <Panel className="grid gap-5">
      <div className="flex flex-wrap gap-3">
        <Button hint="G">Send to grading</Button>
        <Button variant="quiet" hint="C">
          Compare with before
        </Button>
        <Button variant="light">Withdraw</Button>
        <Button variant="bare">Cancel</Button>
        <Button busy>Saving</Button>
        <Button disabled>Publish</Button>
        <Button size="small" variant="quiet">
          Small
        </Button>
        <Button size="bench">Next shot</Button>
        <Key>?</Key>
      </div>
      <div className="flex flex-wrap items-center gap-3">
        <Chip>Testing</Chip>
        <Chip tone="on">Bench</Chip>
        <Chip tone="want">In doubt</Chip>
        <Tag>ML-0042</Tag>
        {(['within', 'doubt', 'outside', 'untested'] as const).map((standing) => (
          <StateDisc key={standing} standing={standing} label />
        ))}
      </div>
      <div className="grid gap-4 sm:grid-cols-3">
        <Input label="Serial" hint="As engraved on the base." placeholder="7K31…" />
        <Select label="Class">
          <option>small-sensor compact</option>
        </Select>
        <Input label="Price" note="optional" error="Enter an amount of zero or more." />
        <Textarea label="Stated fault" />
        <div className="flex flex-wrap content-start gap-2">
          <Choice name="outcome" label="Pass" defaultChecked />
          <Choice name="outcome" label="Fail" />
          <Choice name="outcome" label="Not fitted" />
        </div>
        <FormError>That e-mail address and password don’t belong together.</FormError>
      </div>
      <Progress value={0.39} label="7 of 18 analysed" note="about 9 s" />
      <Table>
        <thead>
          <tr>
            <Th>Unit</Th>
            <Th>Model</Th>
          </tr>
        </thead>
        <tbody>
          <tr>
            <Td>ML-0042</Td>
            <Td>Halvard Optik P5</Td>
          </tr>
        </tbody>
      </Table>
      <LoadingLines />
      <EmptyState title="No camera has come in yet" action={<Button>Take one in</Button>}>
        A unit begins with its model, its serial and the fault it came with.
      </EmptyState>
      <ErrorState title="The run could not be read">Try again in a moment.</ErrorState>
    </Panel>
  );
}
