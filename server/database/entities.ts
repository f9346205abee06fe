import { BalanceEntity } from '../books/balance.entity.ts';
import { MonthSumEntity } from '../books/month-sum.entity.ts';
import { PlaceStateEntity } from '../books/place-state.entity.ts';
import { PurchasePriceEntity } from '../books/purchase-price.entity.ts';
import { ChargeSheetEntity } from '../charge-sheets/charge-sheet.entity.ts';
import { CustomerEntity } from '../customers/customer.entity.ts';
import { CylinderEntity } from '../cylinders/cylinder.entity.ts';
import { CylinderTareEntity } from '../cylinders/cylinder-tare.entity.ts';
import { EntryEntity } from '../entries/entry.entity.ts';
import { EntryGroupEntity } from '../entries/entry-group.entity.ts';
import { GroupDocumentEntity } from '../entries/group-document.entity.ts';
import { ReadingEntity } from '../entries/reading.entity.ts';
import { StatementEntity } from '../entries/statement.entity.ts';
import { ExportEntity } from '../exports/export.entity.ts';
import { FirmEntity } from '../firm/firm.entity.ts';
import { FlagEntity } from '../flags/flag.entity.ts';
import { InvitationEntity } from '../invitations/invitation.entity.ts';
import { JobEntity } from '../jobs/job.entity.ts';
import { FirmHeadEntity } from '../journal/firm-head.entity.ts';
import { JournalRecordEntity } from '../journal/journal-record.entity.ts';
import { PersonalTextEntity } from '../journal/personal-text.entity.ts';
import { PartyEntity } from '../parties/party.entity.ts';
import { LastSignInEntity } from '../people/last-sign-in.entity.ts';
import { MembershipEntity } from '../people/membership.entity.ts';
import { PersonEntity } from '../people/person.entity.ts';
import { CarriedItemEntity } from '../periods/carried-item.entity.ts';
import { PeriodEntity } from '../periods/period.entity.ts';
import { SettlementEntity } from '../periods/settlement.entity.ts';
import { SettlementUndoEntity } from '../periods/settlement-undo.entity.ts';
import { RentalTermsEntity } from '../rental-terms/rental-terms.entity.ts';
import { SealMailEntity } from '../seals/seal-mail.entity.ts';
import { PasswordResetEntity } from '../session/password-reset.entity.ts';
import { PersonSecretEntity } from '../session/person-secret.entity.ts';
import { SessionEntity } from '../session/session.entity.ts';
import { SignInFailureEntity } from '../session/sign-in-failure.entity.ts';
import { SiteEntity } from '../sites/site.entity.ts';
import { CylinderHolderEntity } from '../statements/cylinder-holder.entity.ts';
import { PersonalTokenEntity } from '../tokens/personal-token.entity.ts';
import { ToolEntity } from '../tools/tool.entity.ts';
import { ChargeBasisEntity } from '../units/charge-basis.entity.ts';
import { LineSetEntity } from '../units/line-set.entity.ts';
import { UnitEntity } from '../units/unit.entity.ts';
import { UnitFullChargeEntity } from '../units/unit-full-charge.entity.ts';
import { UnitRefrigerantEntity } from '../units/unit-refrigerant.entity.ts';
import { UnitSiteEntity } from '../units/unit-site.entity.ts';

/** Every table, in the order of the migrations. */
export const ENTITIES = [
  FirmEntity,
  PersonEntity,
  MembershipEntity,
  LastSignInEntity,
  InvitationEntity,
  PersonSecretEntity,
  SessionEntity,
  SignInFailureEntity,
  PasswordResetEntity,
  PersonalTokenEntity,
  CustomerEntity,
  SiteEntity,
  PartyEntity,
  ToolEntity,
  JobEntity,
  UnitEntity,
  UnitRefrigerantEntity,
  UnitFullChargeEntity,
  UnitSiteEntity,
  ChargeBasisEntity,
  LineSetEntity,
  ChargeSheetEntity,
  CylinderEntity,
  CylinderTareEntity,
  FirmHeadEntity,
  JournalRecordEntity,
  PersonalTextEntity,
  EntryGroupEntity,
  EntryEntity,
  ReadingEntity,
  StatementEntity,
  GroupDocumentEntity,
  BalanceEntity,
  MonthSumEntity,
  PlaceStateEntity,
  FlagEntity,
  SealMailEntity,
  PeriodEntity,
  SettlementEntity,
  SettlementUndoEntity,
  CarriedItemEntity,
  CylinderHolderEntity,
  PurchasePriceEntity,
  RentalTermsEntity,
  ExportEntity,
];
