import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { chargeSheetQueries } from '../../../api/charge-sheets.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { Failed, RowsSkeleton } from '../../../ui/notice.tsx';
import { ChoiceList, ChoiceRow } from '../choice-list.tsx';
import { StepPage } from '../step-page.tsx';
import type { StepProps } from '../use-weigh-in.ts';
import { purposeOfSheet, useWeighInData } from '../weigh-in-data.ts';

/** Sheets older than the newest few are history; the unit's page has them. */
const SHOWN = 3;

export function PurposeStep({ weighIn, dispatch }: StepProps) {
  const t = useMessages();
  const format = useFormat();
  const { unit } = useWeighInData();
  const sheets = useQuery(chargeSheetQueries.ofUnit(unit.id));
  const offered = (sheets.data ?? []).slice(0, SHOWN).flatMap((sheet) => {
    const asked = purposeOfSheet(sheet);
    return asked ? [{ sheet, asked }] : [];
  });
  const fullChargeG = unit.fullCharge?.massG ?? null;
  return (
    <StepPage weighIn={weighIn} dispatch={dispatch} title={t('weighIn.purpose.title')} lead={t('weighIn.purpose.lead')}>
      {sheets.isPending ? <RowsSkeleton rows={2} rowClass="h-16" /> : null}
      {sheets.isError ? <Failed error={sheets.error} onRetry={() => void sheets.refetch()} /> : null}
      <ChoiceList label={t('weighIn.purpose.title')}>
        {offered.map(({ sheet, asked }) => (
          <ChoiceRow
            key={sheet.id}
            title={t(`weighIn.purpose.${asked.purpose}.bySheet`)}
            detail={t('weighIn.purpose.sheetOf', { date: format.longDateTime(sheet.madeAt), name: sheet.madeByName })}
            aside={format.mass(sheet.result.weighInG)}
            chosen={weighIn.sheetId === sheet.id}
            onChoose={() =>
              dispatch({ type: 'purpose', purpose: asked.purpose, target: asked.target, sheetId: sheet.id })
            }
          />
        ))}
        <ChoiceRow
          title={t('weighIn.purpose.fullRecharge')}
          detail={t('weighIn.purpose.fullRecharge.detail')}
          aside={fullChargeG === null ? null : format.mass(fullChargeG)}
          chosen={weighIn.purpose === 'fullRecharge' && weighIn.sheetId === null}
          onChoose={() =>
            dispatch({
              type: 'purpose',
              purpose: 'fullRecharge',
              target: unit.fullCharge ? { value: String(unit.fullCharge.massG), unit: 'g' } : null,
              sheetId: null,
            })
          }
        />
        <ChoiceRow
          title={t('weighIn.purpose.adjust')}
          detail={t('weighIn.purpose.adjust.detail')}
          chosen={weighIn.purpose === 'adjust'}
          onChoose={() => dispatch({ type: 'purpose', purpose: 'adjust', target: null, sheetId: null })}
        />
        <ChoiceRow
          title={t('weighIn.purpose.refill')}
          detail={t('weighIn.purpose.refill.detail')}
          chosen={weighIn.purpose === 'refill'}
          onChoose={() => dispatch({ type: 'purpose', purpose: 'refill', target: null, sheetId: null })}
        />
      </ChoiceList>
      {sheets.isSuccess && offered.length === 0 ? (
        <p className="text-[0.9375rem] text-ink-soft">
          {t('weighIn.purpose.noSheet')}{' '}
          <Link to={`/units/${unit.id}/charge`} className="inline-flex min-h-12 items-center">
            {t('weighIn.purpose.workOut')}
          </Link>
        </p>
      ) : null}
    </StepPage>
  );
}
