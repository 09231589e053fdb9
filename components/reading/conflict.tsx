'use client';

import { useRouter } from 'next/navigation';
import { Mark } from '@/components/figures/marks';
import { Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import type { Refusal } from './keep-change';

interface Props {
  refusal: Refusal;
  /** What this person had not saved, kept on the screen. */
  kept: string;
  onClose: () => void;
}

/** Someone was faster, or the service refused: what happened, and that nothing typed is lost. */
export function ConflictNotice({ refusal, kept, onClose }: Props) {
  const router = useRouter();
  const changed =
    refusal.code === 'CHANGED_MEANWHILE' ||
    refusal.code === 'WRONG_STATE' ||
    refusal.code === 'ALREADY_THERE';
  return (
    <Notice
      stop
      live
      mark={<Mark kind={changed ? 'check-look' : 'check-stop'} />}
      title={refusal.message}
      act={
        changed ? (
          <Button
            onClick={() => {
              onClose();
              router.refresh();
            }}
          >
            See theirs
          </Button>
        ) : (
          <Button onClick={onClose}>Close</Button>
        )
      }
    >
      {kept}
    </Notice>
  );
}
