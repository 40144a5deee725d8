import { GradeDial } from '@/components/pictures/grade-dial';
import { Wordmark } from '@/components/pictures/mark';
import { exampleRules } from '@/components/public/example';
import { ExampleSection } from '@/components/public/example-section';
import { ButtonLink } from '@/components/ui/button';
import { Panel, Sheet } from '@/components/ui/panel';
import { currentActor } from '@/lib/server/session';

const way = [
  {
    title: 'Take in and mend',
    text: 'Each camera gets its tag, its bench log and its list of function checks. What was tried, what it ruled out and which part went in stays on record.',
  },
  {
    title: 'Photograph the target',
    text: 'Three shots of a printed target tell how the camera exposes, draws, colours and frays. Drop the files on the page; results appear as they come.',
  },
  {
    title: 'A second person signs',
    text: 'The rules propose a grade and say why, with every doubt shown. Someone who did not do the repair signs it or overrides it in writing.',
  },
  {
    title: 'The buyer reads and checks',
    text: 'One page in plain words: what is good, what is weak and what to do about it, with the pictures, the doubt and the hashes behind each number.',
  },
];

export default async function LandingPage() {
  const actor = await currentActor();
  const door = actor
    ? { href: '/bench', label: 'To the bench' }
    : { href: '/sign-in', label: 'Sign in' };
  return (
    <div className="mx-auto max-w-report px-6 pt-7 pb-14 max-sm:px-3 max-sm:pt-4">
      <header className="flex items-center justify-between gap-4 px-1 pb-5">
        <Wordmark size={30} />
        <ButtonLink href={door.href}>{door.label}</ButtonLink>
      </header>
      <main className="grid gap-4">
        <Sheet className="grid items-center gap-7 sm:grid-cols-[1fr_240px]">
          <div>
            <h1>Proof that a repaired camera takes a good picture</h1>
            <p className="mt-3.5 max-w-[32em] text-pretty text-[21px]/[1.35] max-sm:text-[18px]">
              Nobody can see from outside whether a mended camera meters, focuses and draws as it
              should. Mendlight measures it from photographs of a printed target, says how sure it
              is, and tells the buyer in plain words.
            </p>
            <div className="mt-6 flex flex-wrap gap-2.5">
              <ButtonLink href={door.href} variant="ink">
                {door.label}
              </ButtonLink>
              <ButtonLink href="#example">What a report shows</ButtonLink>
            </div>
          </div>
          <figure className="justify-self-center max-sm:order-first">
            <GradeDial letter="B" rules={exampleRules} size={236} />
            <figcaption className="label text-balance text-center">
              Example: one disc a rule, one in doubt, one not met
            </figcaption>
          </figure>
        </Sheet>
        <ExampleSection />
        <ol className="grid gap-4 sm:grid-cols-2">
          {way.map(({ title, text }, index) => (
            <li key={title}>
              <Panel className="h-full">
                <div className="label">{index + 1}</div>
                <h2 className="mt-1">{title}</h2>
                <p className="mt-2 text-ink-2">{text}</p>
              </Panel>
            </li>
          ))}
        </ol>
        <Sheet className="grid gap-x-8 gap-y-3 sm:grid-cols-2">
          <div>
            <h2>Measured by published standards</h2>
            <p className="mt-2 text-ink-2">
              Sharpness follows ISO 12233, exposure ISO 12232, colour fringes ISO 19084, colour
              difference ISO/CIE 11664-6, noise ISO 15739, shading ISO 17957.
            </p>
          </div>
          <div>
            <h2>Graded without guessing</h2>
            <p className="mt-2 text-ink-2">
              Each result carries its expanded uncertainty, and a grade is decided by JCGM 106: what
              is in doubt never passes silently.
            </p>
          </div>
        </Sheet>
      </main>
    </div>
  );
}
