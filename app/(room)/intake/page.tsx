import type { Metadata } from 'next';
import { listBenchChoices } from '@/lib/server/queries/benches';
import { intakeFrames } from '@/lib/server/queries/frames';
import { listOpenLots } from '@/lib/server/queries/lots';
import { listSources } from '@/lib/server/queries/sources';
import { benchInUse, requireMe } from '@/lib/server/session';
import { chooseBench, emptyIntake } from '../actions';
import { sendToReview } from '../readings/actions';
import { IntakeRoom } from './_components/intake-room';

export const metadata: Metadata = { title: 'Intake' };

export default async function Intake() {
  const me = await requireMe('frames.upload');
  const [benches, inUse, lots, sources, frames] = await Promise.all([
    listBenchChoices(),
    benchInUse(),
    listOpenLots(),
    listSources(),
    intakeFrames(me.id),
  ]);
  return (
    <IntakeRoom
      me={me}
      benches={benches}
      benchInUse={inUse}
      lots={lots}
      sources={sources}
      frames={frames}
      chooseBench={chooseBench}
      emptyIntake={emptyIntake}
      sendToReview={sendToReview}
    />
  );
}
