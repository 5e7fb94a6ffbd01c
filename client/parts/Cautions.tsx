import { usePage } from '../context.ts';

/** What the program cannot see and a person on site must. The keys say what calls for it. */
const CAUTIONS = {
  minimumFlow: {
    title: 'Minimum flow',
    text: "Water that stays in a pump is heated. Do not run a pump near a closed valve, or below the maker's minimum flow, however little power it seems to take: it heats, shakes and wears.",
  },
  minimumSpeed: {
    title: 'Slow running',
    text: 'A motor cools itself with its own fan, and a shaft has speeds at which it shakes. Ask the makers for the least speed and the speeds to skip.',
  },
  surge: {
    title: 'Surge (water hammer)',
    text: 'Starting or stopping a pump, or moving a valve or a speed too fast, sends a pressure wave along the main that can burst it. Have ramps and valve times checked before steps are changed.',
  },
  solids: {
    title: 'Least velocity',
    text: 'A rising main that carries solids needs a flow fast enough to move them. Fewer pumps or lower speeds can let it silt up.',
  },
  starts: {
    title: 'Starts per hour',
    text: "Each start heats the motor. Keep to the maker's limit, and mind that a small wet well makes many starts.",
  },
  drives: {
    title: 'What drives bring with them',
    text: 'Drives put harmonics on the supply and currents through motor bearings. Filters, cables and bearings to suit are part of the price.',
  },
  firm: {
    title: 'Firm capacity',
    text: 'A station must still meet its duty with the largest pump out of service. No saving changes that.',
  },
  suction: {
    title: 'Suction',
    text: 'More flow through a pump needs more pressure at its inlet (NPSH). Check the margin before fewer pumps carry more each.',
  },
  siteWork: {
    title: 'Work on site',
    text: 'Before anyone opens a panel, a valve chamber or a pump: isolate, lock out and tag. A wet well is a confined space: its gas kills without warning. Enter with a permit, a gas test and a rescue plan, or not at all.',
  },
} as const;

export type CautionId = keyof typeof CAUTIONS;

/** Cautions, beside what calls for them. On paper they stand together at the end, each once. */
export function Cautions({ ids }: { readonly ids: readonly CautionId[] }) {
  return usePage().printing ? null : <CautionList ids={ids} />;
}

/** Every caution, for the end of a printed page. */
export function AllCautions() {
  return <CautionList ids={Object.keys(CAUTIONS) as CautionId[]} />;
}

function CautionList({ ids }: { readonly ids: readonly CautionId[] }) {
  return (
    <aside class="cautions" aria-label="Cautions">
      {ids.map((id) => (
        <p key={id}>
          <strong>{CAUTIONS[id].title}.</strong> {CAUTIONS[id].text}
        </p>
      ))}
    </aside>
  );
}

/** The line that is always in sight. */
export function AdviceOnly() {
  return (
    <p class="advice-only">Advice only: it controls nothing. Local codes and a licensed engineer have the last word.</p>
  );
}
