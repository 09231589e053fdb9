import Link from 'next/link';
import { Mark } from '@/components/figures/marks';
import { buttonClass } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { count } from '@/lib/client/words';

/** Readings of this person that came back; nothing where none did. */
export function ReturnedNotice({ returned }: { returned: number }) {
  if (returned === 0) return null;
  return (
    <div className="mt-3 mb-2">
      <Notice
        mark={<Mark kind="reading-returned" />}
        title={`${count(returned, 'of your readings has', 'of your readings have')} come back`}
        act={
          <Link className={buttonClass()} href="/frames?state=returned&mine=1&days=all&bench=all">
            Show {returned === 1 ? 'it' : 'them'}
          </Link>
        }
      >
        Each says why. Change the region and send it again, or take the frame again.
      </Notice>
    </div>
  );
}
