import Link from 'next/link';
import { Empty } from '@/components/states/empty';
import { buttonClass } from '@/components/ui/button';

export default function NotFound() {
  return (
    <div className="page py-8">
      <Empty
        page
        searched
        title="There is nothing at this address"
        acts={
          <Link className={buttonClass()} href="/frames">
            Go to Frames
          </Link>
        }
      >
        The link may be mistyped, or it names something that was never there.
      </Empty>
    </div>
  );
}
