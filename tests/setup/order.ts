import { statSync } from 'node:fs';
import { BaseSequencer, type TestSpecification } from 'vitest/node';

/**
 * In which order files begin. Journeys that mostly wait for a plant come first, then what keeps a core busy, small files
 * last: so no core is idle, and no long file is left alone at the end. A file that is not named goes by its size.
 */
const FIRST = [
  'e2e/shutdown-test',
  'e2e/whole-job',
  'e2e/commissioning',
  'e2e/pages',
  'integration/jobs-killed',
  'e2e/roll-call',
  'integration/truth',
];
const PROJECTS = ['e2e', 'access', 'integration', 'migrations', 'unit', 'architecture'];

const place = (list: readonly string[], test: (entry: string) => boolean): number => {
  const found = list.findIndex(test);
  return found < 0 ? list.length : found;
};

export default class Order extends BaseSequencer {
  override sort(files: TestSpecification[]): Promise<TestSpecification[]> {
    const keyed = files.map((spec) => ({
      spec,
      group: spec.project.config.sequence.groupOrder,
      first: place(FIRST, (name) => spec.moduleId.includes(`/tests/${name}.`)),
      project: place(PROJECTS, (name) => name === spec.project.name),
      size: statSync(spec.moduleId).size,
    }));
    keyed.sort((a, b) => a.group - b.group || a.first - b.first || a.project - b.project || b.size - a.size);
    return Promise.resolve(keyed.map((k) => k.spec));
  }
}
