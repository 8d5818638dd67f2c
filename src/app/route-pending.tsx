import { Loading } from '#src/components/ui/loading.tsx';

/** While the first page is on its way. */
export function RoutePending() {
  return (
    <div className="px-5 py-4">
      <Loading label="Opening" />
    </div>
  );
}
