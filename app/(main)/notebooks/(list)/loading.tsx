import { LoadingPlace } from '@/components/shell/loading-place';

export default function Loading() {
  return <LoadingPlace title="Notebooks" words="Your notebooks are being looked up." />;
}
