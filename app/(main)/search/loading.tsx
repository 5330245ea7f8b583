import { LoadingPlace } from '@/components/shell/loading-place';

export default function Loading() {
  return <LoadingPlace title="Search" words="Searching …" />;
}
