import { LoadingList } from '@/components/states/loading-list';

export default function Loading() {
  return (
    <div className="page pt-[120px]">
      <LoadingList what="The page is" />
    </div>
  );
}
