import type { RoomLimitResponse } from '../../../shared/room-limit/room-limit.schema.ts';
import { formatQuantity } from '../../../shared/units/format-quantity.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { Caution } from '../../ui/caution.tsx';
import { Disclosure } from '../../ui/disclosure.tsx';
import { SelectField } from '../../ui/field.tsx';
import { Notice } from '../../ui/notice.tsx';
import { emptyQuantity, readQuantity } from '../../ui/quantity-draft.ts';
import { type ChargeDraft, fieldUnits, rowKey } from './charge-draft.ts';
import { useChargeForm, useOpen } from './charge-form.ts';
import { MOUNTING_CHOICES, ROOM_STANDARD_CHOICES } from './fixed-choices.ts';
import { ListRow } from './list-row.tsx';
import { QuantityField } from './quantity-field.tsx';

/** The smallest room served, for flammable refrigerants. The manual's own table comes first. */
export function RoomSection() {
  const t = useMessages();
  const preferences = usePreferences();
  const { draft, set, setRow, addRow, removeRow } = useChargeForm();
  const [open, setOpen] = useOpen(false);
  const area = readQuantity('area', draft.roomArea, { locale: preferences.locale });
  return (
    <Disclosure
      title={t('chargeScreen.room')}
      summary={
        area.is === 'read'
          ? formatQuantity('area', area.base, draft.roomArea.unit, { locale: preferences.locale })
          : t('chargeScreen.notGiven')
      }
      open={open}
      onToggle={setOpen}
    >
      <QuantityField
        kind="area"
        big={false}
        label={t('chargeScreen.room.area')}
        pointer="/room/areaM2"
        draft={draft.roomArea}
        onChange={(value) => set('roomArea', value)}
      />
      <SelectField
        layout="row"
        label={t('chargeScreen.room.mounting')}
        choices={MOUNTING_CHOICES.map((value) => ({ value, label: t(`chargeScreen.room.mounting.${value}`) }))}
        value={draft.mounting}
        onChange={(event) => set('mounting', event.target.value as ChargeDraft['mounting'])}
      />
      <SelectField
        label={t('chargeScreen.room.standard')}
        choices={ROOM_STANDARD_CHOICES.map((value) => ({ value, label: value }))}
        value={draft.roomStandard}
        onChange={(event) => set('roomStandard', event.target.value as ChargeDraft['roomStandard'])}
      />
      <p className="type-label py-1 text-ink-soft">{t('chargeScreen.room.hint')}</p>
      <ul className="border-t border-rule">
        {draft.roomTable.map((row, index) => (
          <ListRow
            key={row.key}
            title={`${t('chargeScreen.room.tableRow')} ${index + 1}`}
            what={`${t('chargeScreen.room.tableRow')} ${index + 1}`}
            onRemove={() => removeRow('roomTable', row.key)}
          >
            <QuantityField
              kind="mass"
              big={false}
              label={t('chargeScreen.room.tableCharge')}
              pointer={`/room/table/${index}/chargeG`}
              draft={row.charge}
              onChange={(charge) => setRow('roomTable', row.key, { charge })}
            />
            <QuantityField
              kind="area"
              big={false}
              label={t('chargeScreen.room.tableArea')}
              pointer={`/room/table/${index}/minimumAreaM2`}
              draft={row.area}
              onChange={(value) => setRow('roomTable', row.key, { area: value })}
            />
          </ListRow>
        ))}
      </ul>
      <Button
        kind="quiet"
        onClick={() => {
          const units = fieldUnits(preferences);
          addRow('roomTable', {
            key: rowKey(),
            charge: emptyQuantity(units.mass),
            area: emptyQuantity(units.area),
          });
        }}
      >
        {t('chargeScreen.room.addTableRow')}
      </Button>
    </Disclosure>
  );
}

/** What the room says to this charge, with the clause that it rests on. */
export function RoomVerdict({ room, totalG }: { room: RoomLimitResponse; totalG: number }) {
  const t = useMessages();
  const format = useFormat();
  const { locale, length } = usePreferences();
  const area = (areaM2: number) => formatQuantity('area', areaM2, length === 'ft' ? 'ft2' : 'm2', { locale });
  const text = t(`chargeScreen.room.verdict.${room.verdict}`, {
    total: format.mass(totalG),
    // Downwards: a limit that is shown may be charged up to.
    limit: room.limitG === null ? '' : format.mass(Math.floor(room.limitG)),
    area: room.minimumAreaM2 === null ? '' : area(room.minimumAreaM2),
  });
  const clause = room.clause.startsWith('manualTable')
    ? t('chargeScreen.room.byManual')
    : room.clause.replaceAll(' x ', ' × ');
  const basis = `${clause}${room.status === 'toBeConfirmed' ? `; ${t('chargeScreen.room.toBeConfirmed')}` : ''}`;
  if (room.verdict === 'over') {
    return (
      <Caution signal="danger">
        {text} <span className="text-ink-soft">{basis}</span>
      </Caution>
    );
  }
  if (room.verdict === 'measuresRequired' || room.verdict === 'areaNeeded') {
    return (
      <Caution signal="warning">
        {text} <span className="text-ink-soft">{basis}</span>
      </Caution>
    );
  }
  return <Notice title={text}>{basis}</Notice>;
}
