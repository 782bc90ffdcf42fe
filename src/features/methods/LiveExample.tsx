import { later } from '../../lib/later';
import { ExampleForm } from './ExampleForm';

/** A judgement to try out. Its code, with that of the judgement, comes when the note nears the screen. */
export const LiveExample = later(
  async () => (await import('./ExampleForm')).ExampleForm,
  import.meta.env.SSR ? ExampleForm : null,
);
