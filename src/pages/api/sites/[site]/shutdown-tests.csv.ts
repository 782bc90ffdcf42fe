import { RESULT_WORDS } from '../../../../words/domain-shutdown-test';
import { listedTests } from '../../../../features/shutdown-test/list';
import { testListView } from '../../../../schemas/api/shutdown-test';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { csvResponse } from '../../../../server/reports/csv';
import { shutdownTestList } from '../../../../server/services/shutdown-test-report';
import { shutdownTestHeads } from '../../../../words/csv-heads-site';

export const GET = endpoint(
  { permission: 'shutdown_test.read', params: siteParams, query: testListView },
  async ({ tx, params, query }) => {
    const list = await shutdownTestList(tx, params.site, new Date());
    return csvResponse(
      `shutdown-tests-${list.site.name}`,
      [
        { header: shutdownTestHeads.zone, value: (t) => t.zone },
        { header: shutdownTestHeads.state, value: (t) => (t.superseded ? 'superseded' : t.state) },
        { header: shutdownTestHeads.timeUtc, value: (t) => t.at },
        { header: shutdownTestHeads.result, value: (t) => t.result && RESULT_WORDS[t.result] },
        { header: shutdownTestHeads.strings, value: (t) => t.strings },
        { header: shutdownTestHeads.stringsFailed, value: (t) => t.failed },
        { header: shutdownTestHeads.stringsCarried, value: (t) => t.carried },
        { header: shutdownTestHeads.signedOrStartedBy, value: (t) => t.by },
        { header: shutdownTestHeads.reasonOfTheEnd, value: (t) => t.reason },
        { header: shutdownTestHeads.fingerprintSHA256, value: (t) => t.fingerprint },
      ],
      listedTests(list.tests, query),
    );
  },
);
