'use client';

import { Mark } from '@/components/figures/marks';
import { Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';

/** Something on the server's side failed; what was chosen is in the address and is kept. */
export default function RoomError({
  error,
  reset,
}: {
  error: Error & { digest?: string };
  reset: () => void;
}) {
  return (
    <div className="page py-8">
      <Notice
        stop
        live
        mark={<Mark kind="check-stop" />}
        title="The page could not be loaded"
        act={<Button onClick={reset}>Try again</Button>}
      >
        The service did not answer as it should. What you chose is kept in the address.
        {error.digest ? ` Mention ${error.digest} when you report it.` : ''}
      </Notice>
    </div>
  );
}
