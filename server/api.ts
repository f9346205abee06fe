import { bookRoutes } from './books/books.router.ts';
import { chargeSheetRoutes } from './charge-sheets/charge-sheet.router.ts';
import { customerRoutes } from './customers/customer.router.ts';
import { cylinderRoutes } from './cylinders/cylinder.router.ts';
import { emissionRoutes } from './emissions/emission.router.ts';
import { entryRoutes } from './entries/entry.router.ts';
import { entryGroupRoutes } from './entries/entry-group.router.ts';
import { entryPreviewRoutes } from './entry-previews/entry-preview.router.ts';
import { exportRoutes } from './exports/export.router.ts';
import { flagRoutes } from './flags/flag.router.ts';
import type { ApiRoutes } from './http/api-routes.ts';
import type { Parts } from './http/parts.ts';
import { importRoutes } from './imports/import.router.ts';
import { jobRoutes } from './jobs/job.router.ts';
import { partyRoutes } from './parties/party.router.ts';
import { periodRoutes } from './periods/period.router.ts';
import { journalRoutes } from './proof/journal.router.ts';
import { proofPackageRoutes } from './proof/package.router.ts';
import { referenceListRoutes } from './reference-lists/reference-list.router.ts';
import { rentalTermsRoutes } from './rental-terms/rental-terms.router.ts';
import { sealRoutes } from './seals/seal.router.ts';
import { siteRoutes } from './sites/site.router.ts';
import { statementRoutes } from './statements/statement.router.ts';
import { todayRoutes } from './today/today.router.ts';
import { toolRoutes } from './tools/tool.router.ts';
import { unitRoutes } from './units/unit.router.ts';

/** Every resource below `/api/v1`. A new one adds its factory here and nothing else: mounting and documenting follow. */
export const RESOURCES: readonly ((parts: Parts) => ApiRoutes)[] = [
  customerRoutes,
  siteRoutes,
  partyRoutes,
  toolRoutes,
  jobRoutes,
  unitRoutes,
  cylinderRoutes,
  rentalTermsRoutes,
  chargeSheetRoutes,
  entryGroupRoutes,
  entryPreviewRoutes,
  entryRoutes,
  flagRoutes,
  exportRoutes,
  importRoutes,
  statementRoutes,
  bookRoutes,
  emissionRoutes,
  periodRoutes,
  todayRoutes,
  referenceListRoutes,
  sealRoutes,
  journalRoutes,
  proofPackageRoutes,
];
