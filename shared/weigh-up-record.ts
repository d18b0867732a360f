import { z } from 'zod';
import { defineContract } from './contract.ts';
import { decision, decisionInput, earlierDecision } from './decision.ts';
import { tickedOffTrial, weighUp, weighUpResult } from './weigh-up.ts';

const access = ['advisor', 'agronomist'] as const;
const params = z.object({ weighUpId: z.uuid() });

/** What was decided, and what was decided for the same farm and crop in earlier seasons, newest first. */
export const readDecisions = defineContract({
  method: 'GET',
  path: '/api/weigh-ups/:weighUpId/decision',
  access,
  params,
  reply: z.object({ decision: decision.nullable(), earlier: z.array(earlierDecision) }),
});

/** Records a decision with what the evidence says now, or takes it back (null); `revision-conflict` as in changeWeighUp. */
export const recordDecision = defineContract({
  method: 'PUT',
  path: '/api/weigh-ups/:weighUpId/decision',
  access,
  params,
  body: z.object({ revision: z.number().int(), decision: decisionInput.nullable() }),
  reply: z.object({ weighUp, decision: decision.nullable() }),
});

/** Puts a weigh-up away or brings it back: archived ones are listed only when asked for. */
export const archiveWeighUp = defineContract({
  method: 'PUT',
  path: '/api/weigh-ups/:weighUpId/archived',
  access,
  params,
  body: z.object({ isArchived: z.boolean() }),
  reply: z.object({ archivedAt: z.iso.datetime().nullable() }),
});

/** Asks the same question over a span of seasons one later, as a weigh-up of its own. */
export const duplicateWeighUp = defineContract({
  method: 'POST',
  path: '/api/weigh-ups/:weighUpId/duplicates',
  access,
  params,
  reply: z.object({ weighUp }),
});

/** Says which trials do not count, the whole list with their reasons, and answers without them; `revision-conflict` as in changeWeighUp. */
export const tickOffTrials = defineContract({
  method: 'PUT',
  path: '/api/weigh-ups/:weighUpId/ticked-off',
  access,
  params,
  body: z.object({
    revision: z.number().int(),
    tickedOff: z
      .array(tickedOffTrial)
      .max(200)
      .refine((trials) => new Set(trials.map(({ trialId }) => trialId)).size === trials.length),
  }),
  reply: z.object({ weighUp, result: weighUpResult }),
});
