import { RESULT_WORDS } from '../../../../words/domain-shutdown-test';
import { listedTests } from '../../../../features/shutdown-test/list';
import { testListView } from '../../../../schemas/api/shutdown-test';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { csvResponse } from '../../../../server/reports/csv';
import { shutdownTestList } from '../../../../server/services/shutdown-test-report';

export const GET = endpoint(
  { permission: 'shutdown_test.read', params: siteParams, query: testListView },
  async ({ tx, params, query }) => {
    const list = await shutdownTestList(tx, params.site, new Date());
    return csvResponse(
      `shutdown-tests-${list.site.name}`,
      [
        { header: 'zone', value: (t) => t.zone },
        { header: 'state', value: (t) => (t.superseded ? 'superseded' : t.state) },
        { header: 'time (UTC)', value: (t) => t.at },
        { header: 'result', value: (t) => t.result && RESULT_WORDS[t.result] },
        { header: 'strings', value: (t) => t.strings },
        { header: 'strings failed', value: (t) => t.failed },
        { header: 'strings carried from an earlier test', value: (t) => t.carried },
        { header: 'signed or started by', value: (t) => t.by },
        { header: 'reason of the end', value: (t) => t.reason },
        { header: 'fingerprint (SHA-256)', value: (t) => t.fingerprint },
      ],
      listedTests(list.tests, query),
    );
  },
);
