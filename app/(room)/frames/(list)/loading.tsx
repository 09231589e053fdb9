import { LoadingList } from '@/components/states/loading-list';

export default function Loading() {
  return (
    <div className="page">
      <div className="headline">
        <h1>Frames</h1>
      </div>
      <div className="pt-12">
        <LoadingList what="Frames:" />
      </div>
    </div>
  );
}
