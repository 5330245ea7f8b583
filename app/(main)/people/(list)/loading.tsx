import { LoadingPlace } from '@/components/shell/loading-place';

export default function Loading() {
  return <LoadingPlace title="People" words="The people are being looked up." />;
}
