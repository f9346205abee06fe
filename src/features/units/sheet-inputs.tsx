import type { LineSetRequest } from '../../../shared/charge/charge.schema.ts';
import type { ChargeSheet } from '../../../shared/charge-sheets/charge-sheet.schema.ts';
import { formatQuantity } from '../../../shared/units/format-quantity.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { basisWords } from './basis-words.ts';
import { Fact, Part } from './part.tsx';
import { pipeText } from './pipe-sizes.ts';

/** What went into the sheet: job, what the manual says, the pipe, the room. */
export function SheetInputs({ sheet }: { sheet: ChargeSheet }) {
  const t = useMessages();
  const format = useFormat();
  const { locale, length } = usePreferences();
  const { request, manual, room } = sheet;
  return (
    <Part title={t('units.sheet.inputs')}>
      <dl>
        <Fact name={t('units.sheet.job')}>{t(`units.job.${request.job}`)}</Fact>
        {manual ? (
          <Fact name={t('units.basis.manual')}>
            {manual.document}
            {manual.page ? `, ${t('units.basis.page', { page: manual.page })}` : ''}
          </Fact>
        ) : null}
        {basisWords(request.basis, t, format).map(({ name, text }) => (
          <Fact key={name} name={name}>
            {text}
          </Fact>
        ))}
        <Branches lineSet={request.lineSet} name={t('units.lineSet')} />
        {request.previousLineSet ? (
          <Branches lineSet={request.previousLineSet} name={t('units.sheet.previousLineSet')} />
        ) : null}
        {room ? (
          <Fact name={t('units.sheet.room')}>
            {formatQuantity('area', room.areaM2, length === 'ft' ? 'ft2' : 'm2', { locale })},{' '}
            {t(`units.mounting.${room.mounting}`)}
          </Fact>
        ) : null}
      </dl>
    </Part>
  );
}

function Branches({ lineSet, name }: { lineSet: LineSetRequest; name: string }) {
  const t = useMessages();
  const format = useFormat();
  const preferences = usePreferences();
  return (
    <Fact name={name}>
      <ul>
        {lineSet.branches.map((branch) => (
          <li key={branch.name}>
            {branch.name}: <strong className="font-[650]">{format.length(branch.lengthM)}</strong>,{' '}
            {[
              t('units.lineSet.liquid', { size: pipeText(branch.liquidOdMm, preferences) }),
              ...(branch.gasOdMm ? [t('units.lineSet.gas', { size: pipeText(branch.gasOdMm, preferences) })] : []),
              ...(branch.riseM ? [t('units.lineSet.rise', { length: format.length(branch.riseM) })] : []),
              ...(branch.bends ? [t('units.lineSet.bends', { count: branch.bends })] : []),
            ].join(', ')}
          </li>
        ))}
      </ul>
    </Fact>
  );
}
