import type { WriteDocument } from '../exports/run-export.ts';
import { cylinderStatementPaper } from './cylinder-statement-paper.ts';
import { disposalReport } from './disposal-report.ts';
import { frameOf } from './document-frame.ts';
import { jobRecord } from './job-record.ts';
import { periodReport } from './period-report.ts';
import { chargeLabel, unitLog } from './unit-papers.ts';

/** A paper as PDF, in the language and units of who asks, from what that person may see. */
export const writeDocument: WriteDocument = async (parts, manager, request, actor, stream) => {
  const frame = await frameOf(parts, manager, actor, stream);
  switch (request.what) {
    case 'unitLog':
      return unitLog(frame, request.filters.unitId);
    case 'chargeLabel':
      return chargeLabel(frame, request.filters.unitId);
    case 'jobRecord':
      return jobRecord(frame, request.filters.jobId);
    case 'cylinderStatement':
      return cylinderStatementPaper(frame, request.filters);
    case 'periodReport':
      return periodReport(frame, request.filters);
    case 'disposalReport':
      return disposalReport(frame, request.filters);
  }
};
