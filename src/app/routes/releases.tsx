import { ReleasesStage } from '#src/features/releases/components/releases-stage.tsx';

export function ReleasesPage() {
  return <ReleasesStage />;
}
