import { Notice } from '../../components/ui/Notice';
import type { ApiError } from '../../lib/api';

/** How saving went, where no field says it. */
export function Saved({ kept, fault }: { kept: boolean; fault: ApiError | null }) {
  return (
    <div role="status" className="mt-3 empty:hidden">
      {kept && (
        <Notice kind="done" title="Kept">
          It holds from now on.
        </Notice>
      )}
      {fault && (
        <Notice kind="failed" title={fault.fields.length > 0 ? 'Not saved: see the fields' : fault.title}>
          {fault.fields.length > 0 ? '' : fault.message}
        </Notice>
      )}
    </div>
  );
}
