import { Notice } from '../../components/ui/Notice';
import type { ApiError } from '../../lib/api';
import { saved } from '../../words/settings';

/** How saving went, where no field says it. */
export function Saved({ kept, fault }: { kept: boolean; fault: ApiError | null }) {
  return (
    <div role="status" className="mt-3 empty:hidden">
      {kept && (
        <Notice kind="done" title={saved.kept}>
          {saved.itHoldsFromNow}
        </Notice>
      )}
      {fault && (
        <Notice kind="failed" title={fault.fields.length > 0 ? saved.notSaved : fault.title}>
          {fault.fields.length > 0 ? '' : fault.message}
        </Notice>
      )}
    </div>
  );
}
