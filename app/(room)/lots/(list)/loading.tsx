import { LoadingList } from '@/components/states/loading-list';

export default function Loading() {
  return (
    <div className="page">
      <div className="headline">
        <h1>Lots</h1>
      </div>
      <div className="pt-12">
        <LoadingList what="Lots:" />
      </div>
    </div>
  );
}
