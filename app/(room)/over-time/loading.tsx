import { LoadingList } from '@/components/states/loading-list';

export default function Loading() {
  return (
    <div className="page">
      <div className="headline">
        <h1>Over time</h1>
      </div>
      <div className="pt-12">
        <LoadingList what="Over time:" />
      </div>
    </div>
  );
}
