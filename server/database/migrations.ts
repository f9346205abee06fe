import { CreatePeople1764547200001 } from './migrations/1764547200001-create-people.ts';
import { CreateRegisters1764547200002 } from './migrations/1764547200002-create-registers.ts';
import { CreateLog1764547200003 } from './migrations/1764547200003-create-log.ts';
import { CreatePosting1764547200004 } from './migrations/1764547200004-create-posting.ts';
import { ProtectRows1764547200005 } from './migrations/1764547200005-protect-rows.ts';
import { Seals1764633600001 } from './migrations/1764633600001-seals.ts';
import { KeepPeriods1764720000010 } from './migrations/1764720000010-keep-periods.ts';
import { TellReversalsApart1764720000011 } from './migrations/1764720000011-tell-reversals-apart.ts';
import { KeepExports1764806400020 } from './migrations/1764806400020-keep-exports.ts';
import { RentCylinders1764806400030 } from './migrations/1764806400030-rent-cylinders.ts';
import { JournalImports1764892800050 } from './migrations/1764892800050-journal-imports.ts';
import { TieSettlementUndos1764892800060 } from './migrations/1764892800060-tie-settlement-undos.ts';
import { FollowDatedSites1764892800061 } from './migrations/1764892800061-follow-dated-sites.ts';
import { LimitByContents1764892800070 } from './migrations/1764892800070-limit-by-contents.ts';
import { ExportProofPackages1764892800090 } from './migrations/1764892800090-export-proof-packages.ts';

/** In order. Named one by one, because a bundled server has no folder to search. Merged ones are never edited. */
export const MIGRATIONS = [
  CreatePeople1764547200001,
  CreateRegisters1764547200002,
  CreateLog1764547200003,
  CreatePosting1764547200004,
  ProtectRows1764547200005,
  Seals1764633600001,
  KeepPeriods1764720000010,
  TellReversalsApart1764720000011,
  KeepExports1764806400020,
  RentCylinders1764806400030,
  JournalImports1764892800050,
  TieSettlementUndos1764892800060,
  FollowDatedSites1764892800061,
  LimitByContents1764892800070,
  ExportProofPackages1764892800090,
] as const;
