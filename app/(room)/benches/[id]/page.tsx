import type { Metadata } from 'next';
import Link from 'next/link';
import { notFound } from 'next/navigation';
import { BenchConditions } from '@/components/conditions/bench-conditions';
import { GeometryDrawing } from '@/components/figures/geometry-drawing';
import { Mark, SaidCheck } from '@/components/figures/marks';
import { When } from '@/components/figures/when';
import { ReferenceChecks } from '@/components/references/reference-checks';
import { Empty } from '@/components/states/empty';
import { buttonClass } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { can } from '@/lib/domain/permissions';
import { benchConditions } from '@/lib/server/conditions';
import { findBench } from '@/lib/server/queries/benches';
import { referencesOf } from '@/lib/server/queries/references';
import { requireMe } from '@/lib/server/session';
import { enterBenchConditions } from '../../conditions/actions';
import { releaseBench, setBenchRule } from '../../references/actions';
import { LaserCautions } from '@/components/setups/laser-cautions';
import { BenchHelpers } from '../_components/bench-helpers';
import { HowKnown } from '../_components/how-known';
import { SetupList } from '../_components/setup-list';
import { ValuesInForce } from '../_components/values-in-force';
import { WaitingSetup } from '../_components/waiting-setup';
import { decideSetup, takeBackSetup } from '../actions';

interface Props {
  params: Promise<{ id: string }>;
}

export const metadata: Metadata = { title: 'Bench' };

export default async function Bench({ params }: Props) {
  const me = await requireMe('benches.see');
  const id = Number((await params).id);
  if (!Number.isInteger(id) || id < 1) notFound();
  const bench = (await findBench(id)) ?? notFound();
  const setup = bench.inForce;
  const { waiting } = bench;
  const newSetup =
    can(me, 'setups.add') && !waiting ? (
      <Link className={buttonClass()} href={`/benches/${id}/new-setup`}>
        Start setup {bench.lastNumber + 1}…
      </Link>
    ) : null;
  const isMine = waiting?.enteredBy.id === me.id;
  return (
    <div className="page">
      <div className="headline">
        <div className="l">
          <h1>{bench.name}</h1>
          {setup ? (
            <span className="text-ink-2">
              Setup {setup.number}, in force since <When at={setup.from} />
            </span>
          ) : null}
          {setup ? (
            <span className="pl-2.5">
              <SaidCheck word={bench.fitness.word}>{bench.fitness.text}</SaidCheck>
            </span>
          ) : null}
        </div>
        <div className="acts">
          {setup ? newSetup : null}
          {setup && can(me, 'frames.upload') ? (
            <Link className={buttonClass('main')} href="/intake">
              Check with a reference
            </Link>
          ) : null}
        </div>
      </div>
      {bench.note ? <p className="lead text-small">{bench.note}</p> : null}
      {waiting ? (
        <WaitingSetup
          setup={waiting}
          inForce={bench.setups.find(({ number }) => number === waiting.besideNumber) ?? null}
          correction={bench.correction}
          may={{ decide: can(me, 'setups.decide') && !isMine, takeBack: can(me, 'setups.add') && isMine }}
          decideSetup={decideSetup}
          takeBackSetup={takeBackSetup}
        />
      ) : null}
      {setup && bench.newerCertificate && !waiting ? (
        <div className="my-3">
          <Notice mark={<Mark kind="check-look" />} title={`Plate ${setup.plate} has a newer certificate`}>
            Setup {setup.number} keeps the values it took. A new setup takes the new ones.
          </Notice>
        </div>
      ) : null}
      {setup ? (
        <>
          <GeometryDrawing setup={setup} nm={bench.drawNm} drawnFrom={bench.drawnFrom} />
          <div className="bench-cols">
            <ValuesInForce setup={setup} />
            <HowKnown setup={setup} />
            <SetupList setups={bench.setups} ended={bench.ended} inForceId={setup.id} />
          </div>
        </>
      ) : (
        <div className="my-4">
          <Empty title={`${bench.name} has no setup in force`} acts={newSetup}>
            A setup states pixel scale, slit separation, slit width and distance, each with its uncertainty
            and certificate. Frames can be taken once QA has approved it.
          </Empty>
        </div>
      )}
      <ReferenceChecks
        benchId={id}
        view={await referencesOf(id)}
        mayRelease={can(me, 'benches.release')}
        releaseBench={releaseBench}
        setBenchRule={setBenchRule}
      />
      <BenchConditions
        benchId={id}
        now={await benchConditions(id, new Date())}
        atNm={bench.drawNm}
        mayEnter={can(me, 'conditions.enter')}
        enter={enterBenchConditions}
      />
      {setup ? <BenchHelpers setup={setup} nm={bench.drawNm} pictureWidthPx={bench.pictureWidthPx} /> : null}
      <LaserCautions />
    </div>
  );
}
