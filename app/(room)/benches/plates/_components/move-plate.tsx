'use client';

import { useRouter } from 'next/navigation';
import { Button } from '@/components/ui/button';
import { useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';
import type { PlateView } from '@/lib/domain/views';

interface Props {
  plate: PlateView;
  takePlateOff: (input: { plateId: number }) => Promise<ActionAnswer<unknown>>;
  putPlateBack: (input: { plateId: number; benchId: number }) => Promise<ActionAnswer<unknown>>;
}

/** Off the bench it is on, or back onto the bench whose setup names it. */
export function MovePlate({ plate, takePlateOff, putPlateBack }: Props) {
  const router = useRouter();
  const submit = useSubmit<unknown>();
  const done = () => router.refresh();
  const { mountedOn, missedBy } = plate;
  return (
    <>
      {mountedOn ? (
        <Button
          kind="quiet"
          busy={submit.waiting}
          onClick={() => submit.run(() => takePlateOff({ plateId: plate.id }), done)}
        >
          Take it off {mountedOn.bench.name}
        </Button>
      ) : (
        missedBy.map((bench) => (
          <Button
            key={bench.id}
            kind="quiet"
            busy={submit.waiting}
            onClick={() => submit.run(() => putPlateBack({ plateId: plate.id, benchId: bench.id }), done)}
          >
            Put it back on {bench.name}
          </Button>
        ))
      )}
      {submit.message ? (
        <p className="help wrong w-full" role="alert">
          {submit.message}
        </p>
      ) : null}
    </>
  );
}
