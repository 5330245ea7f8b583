import { LoadingPlace } from '@/components/shell/loading-place';

export default function Loading() {
  return <LoadingPlace title="Today" words="Your entries are being looked up." />;
}
