import type { PrintOrder } from '#server/grower-copy/pdf/printed-copy.ts';
import { viewAnalysis } from '#server/trials/analyse-content-view.ts';
import { estimateFromEvidence } from '#server/usual-variances/estimate-from-evidence.ts';
import { weighEvidence } from '#server/weigh-up/weigh-evidence.ts';

/** A copy as a PDF. What writes PDFs is loaded when one is first asked for: whoever weighs need not wait for it. */
async function renderCopyPdf(order: PrintOrder): Promise<Uint8Array> {
  const printing = await import('#server/grower-copy/pdf/render-copy-pdf.ts');
  return printing.renderCopyPdf(order);
}

/** What a worker can be asked for: pure functions of what a message carries. */
export const computingTasks = { weighEvidence, viewAnalysis, estimateFromEvidence, renderCopyPdf } as const;

export type ComputingTasks = typeof computingTasks;
export type TaskName = keyof ComputingTasks;
