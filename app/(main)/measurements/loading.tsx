import { LoadingPlace } from '@/components/shell/loading-place';

export default function Loading() {
  return <LoadingPlace title="Measurements" words="The measurements are being looked up." />;
}
