import { z } from 'zod';
import { apiSchemas, list, text, whole } from './describe';

/**
 * What every failure answers (RFC 9457, application/problem+json). Members may be added, so it is not closed as the answers are.
 */
export const problem = z.object({
  type: text.meta({ description: 'Always "about:blank": the code tells the kinds apart.' }),
  title: text,
  status: whole,
  detail: text.meta({ description: 'A sentence for a person: what is wrong and what would be right.' }),
  code: text.optional().meta({
    description:
      'A stable word: unauthenticated, forbidden, not-found, invalid, conflict, too-large, unsupported, file-problems, too-many-requests, unforeseen.'
  }),
  instance: text.optional().meta({ description: 'Names the line of the log that has the rest.' }),
  problems: list(
    z.object({
      path: text.meta({ description: 'The parameter, or sheet and cell: "Carbon!F18".' }),
      message: text,
      found: text.optional(),
      expected: text.optional()
    })
  ).optional(),
  importId: text.optional().meta({ description: 'With 422: the import that keeps the file.' }),
  retryAfterSeconds: whole.optional()
});
apiSchemas.add(problem, { id: 'Problem' });
