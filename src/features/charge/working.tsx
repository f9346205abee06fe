import { memo } from 'react';
import type { ChargeRequest, ChargeResponse } from '../../../shared/charge/charge.schema.ts';
import type { RoomLimitResponse } from '../../../shared/room-limit/room-limit.schema.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { useWrittenLines } from '../../lib/written-lines.ts';
import { Caution, type Signal, SignalWord } from '../../ui/caution.tsx';
import { Notice } from '../../ui/notice.tsx';
import type { ChargeDraft } from './charge-draft.ts';
import { WithCo2 } from './co2.tsx';
import { inOwnUnits } from './in-own-units.ts';
import { lineUnits } from './line-units.ts';
import { pipeName } from './pipe-choices.ts';
import { sizesOfPipe } from './reference-tables.ts';
import { RoomVerdict } from './room-section.tsx';

interface Props {
  draft: ChargeDraft;
  request: ChargeRequest;
  result: ChargeResponse;
  room: RoomLimitResponse | null;
}

/** The arithmetic as lines that can be checked with a pencil, what is odd about them, and what is dangerous. */
export const Working = memo(function Working({ draft, request, result, room }: Props) {
  const t = useMessages();
  const preferences = usePreferences();
  return (
    <div className="flex flex-col gap-5 pt-4">
      <Arithmetic draft={draft} request={request} result={result} />
      {result.warnings.length > 0 ? (
        <ul className="flex flex-col gap-2.5" aria-label={t('chargeScreen.warnings')}>
          {result.warnings.map((warning) => (
            <li key={warning.code + warning.message}>
              <Notice>
                <WithCo2 text={inOwnUnits(warning.message, preferences)} />
              </Notice>
            </li>
          ))}
        </ul>
      ) : null}
      {room ? <RoomVerdict room={room} totalG={result.totalG} /> : null}
      <Cautions result={result} roomKnown={room !== null} />
    </div>
  );
});

function Arithmetic({ draft, request, result }: Omit<Props, 'room'>) {
  const t = useMessages();
  const preferences = usePreferences();
  const { lines, hasOther, inSi, turn } = useWrittenLines(result.steps, lineUnits(draft, preferences.locale));
  const page = draft.page.trim();
  return (
    <section aria-label={t('chargeScreen.arithmetic')}>
      <ol className="border-b border-rule">
        {result.steps.map((step, index) => (
          <li
            // biome-ignore lint/suspicious/noArrayIndexKey: a line is its place in the working
            key={index}
            className="grid grid-cols-[minmax(0,1fr)_auto] items-baseline gap-x-4 border-t border-rule py-1.5"
          >
            <div>
              <p className="text-[1rem] leading-snug">
                {lines[index]?.slice(0, -1).map((part) => `${part} = `)}
                <strong className="font-[680] whitespace-nowrap">{lines[index]?.at(-1)}</strong>
              </p>
              <p className="type-label text-[0.875rem] leading-tight text-ink-soft">
                <WithCo2 text={inOwnUnits(step.label, preferences)} />
              </p>
            </div>
            <p className="type-label max-w-32 text-right text-[0.875rem] leading-tight text-ink-soft desk:max-w-64">
              {step.source}
              {page !== '' && isFromManual(step.source, t('chargeScreen.manualPrefix'))
                ? t('chargeScreen.onPage', { page })
                : ''}
            </p>
          </li>
        ))}
        <Plausibility draft={draft} request={request} result={result} />
      </ol>
      {hasOther ? (
        <button
          type="button"
          onClick={turn}
          className="type-label inline-flex min-h-12 items-center text-rest underline underline-offset-[3px]"
        >
          {t(inSi ? 'line.inOwn' : 'line.inSi')}
        </button>
      ) : null}
    </section>
  );
}

const isFromManual = (source: string, prefix: string) => source.toLowerCase().startsWith(prefix.toLowerCase());

/** Whether the rate as typed lies in what this pipe can hold; it advises, the manual rules. */
function Plausibility({ draft, request, result }: Omit<Props, 'room'>) {
  const t = useMessages();
  const format = useFormat();
  const preferences = usePreferences();
  const told = new Set<string>();
  return result.ratePlausibility.map(({ branch, lowGPerM, highGPerM, verdict }) => {
    const od = draft.pipes.find((pipe) => pipe.name.trim() === branch)?.liquidOd ?? '';
    if (told.has(od)) return null;
    told.add(od);
    return (
      <li
        key={branch}
        className="grid grid-cols-[minmax(0,1fr)_auto] items-baseline gap-x-4 border-t border-rule py-1.5"
      >
        <p className="text-[1rem] leading-snug">
          {t(`chargeScreen.plausible.${verdict}`, {
            rate: format.rate(rateOf(request, Number(od))),
            pipe: od === '' ? branch : pipeName(Number(od), preferences),
          })}
        </p>
        <p className="type-label text-right text-[0.875rem] leading-tight text-ink-soft">
          {t('chargeScreen.plausible.band', { low: format.rateFigure(lowGPerM), high: format.rate(highGPerM) })}
        </p>
      </li>
    );
  });
}

/** The rate that applies to this pipe, in g/m. */
function rateOf({ basis: { rate } }: ChargeRequest, odMm: number): number {
  if (rate.kind === 'flat') return rate.gPerM;
  if (rate.kind !== 'byLiquidPipe') return 0;
  const size = sizesOfPipe.find(odMm);
  return rate.sizes.find((row) => sizesOfPipe.find(row.liquidOdMm) === size)?.gPerM ?? 0;
}

const ROOM_CODES = /^(noRoomCheck|roomCheckNeeded)/;

/** Each signal word once, with its sentences; who governs stands last, without a panel. */
function Cautions({ result, roomKnown }: { result: ChargeResponse; roomKnown: boolean }) {
  const t = useMessages();
  const preferences = usePreferences();
  const shown = result.cautions.filter(({ code }) => code !== 'manualGoverns' && !(roomKnown && ROOM_CODES.test(code)));
  const governs = result.cautions.find(({ code }) => code === 'manualGoverns');
  const signals = [...new Set(shown.map((caution) => caution.signal))] as Signal[];
  return (
    <section aria-label={t('chargeScreen.cautions')} className="flex flex-col gap-3.5">
      {signals.map((signal) => {
        const sentences = shown.filter((caution) => caution.signal === signal);
        const [only] = sentences;
        if (sentences.length === 1 && only) {
          return (
            <Caution key={signal} signal={signal}>
              {inOwnUnits(only.message, preferences)}
            </Caution>
          );
        }
        return (
          <div
            key={signal}
            className="grid items-start justify-items-start gap-x-3 gap-y-1 text-[0.9375rem] leading-snug xs:grid-cols-[7.75rem_minmax(0,1fr)]"
          >
            <SignalWord signal={signal} />
            <ul className="flex flex-col gap-1.5 pt-px">
              {sentences.map((caution) => (
                <li key={caution.code}>{inOwnUnits(caution.message, preferences)}</li>
              ))}
            </ul>
          </div>
        );
      })}
      {governs ? <p className="border-t border-rule pt-3 text-[0.9375rem] text-ink-soft">{governs.message}</p> : null}
    </section>
  );
}
