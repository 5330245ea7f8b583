import { LoadingPlace } from '@/components/shell/loading-place';

export default function Loading() {
  return (
    <LoadingPlace title={'\u00A0'} words="The entries of this notebook are being looked up." lines={8} />
  );
}
