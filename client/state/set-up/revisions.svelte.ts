import type { RevisionsAnswer } from '../../../shared/protocol/http.ts';
import { fetchRevisions } from '../../feed/set-up.ts';

/** What the set-up has been, newest first. */
export class RevisionList {
  revisions = $state.raw<RevisionsAnswer['revisions'] | null>(null);
  trouble = $state<string | null>(null);

  async load(): Promise<void> {
    const answer = await fetchRevisions();
    this.trouble = answer.ok ? null : answer.problem.error;
    if (answer.ok) ({ revisions: this.revisions } = answer.value);
  }
}
