import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, type LoaderFunctionArgs, useLoaderData } from 'react-router-dom';
import { addRentalTermsRequest, type RentalView } from '../../../shared/rental-terms/rental-terms.schema.ts';
import type { SeparatorMeaning } from '../../../shared/units/read-number.ts';
import { cylinderQueries } from '../../api/cylinders.ts';
import { answerErrors, errorAt, errorsElsewhere, type FormError, schemaErrors } from '../../api/form-errors.ts';
import { queryClient } from '../../api/query-client.ts';
import { rentalQueries, useAddRentalTerms } from '../../api/rental-terms.ts';
import { requireSession, usePermission, useSession } from '../../api/session.ts';
import { useDraft } from '../../lib/draft.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow, toDayInput } from '../../lib/local-time.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { AmountInput, amountDraft, readAmount } from '../../ui/amount-input.tsx';
import { Button } from '../../ui/button.tsx';
import { ChoiceField, FieldError, TextField } from '../../ui/field.tsx';
import { Done, Failed, Notice, RowsSkeleton } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { useAmount } from './use-amount.ts';

export async function loader({ request, params }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('stock-take', 'server')]);
  return queryClient.ensureQueryData(cylinderQueries.one(params.cylinderId ?? ''));
}

/** What a rented cylinder costs: deposit, rate, days so far, and the terms by their days. */
export function Component() {
  const t = useMessages();
  const cylinder = useLoaderData<typeof loader>();
  const rental = useQuery(rentalQueries.of(cylinder.id));
  const mayWrite = usePermission('cylinders:write');
  const [done, setDone] = useState(false);
  return (
    <Page
      field
      title={t('rental.title', { tag: cylinder.tag })}
      actions={
        <Link to={`/cylinders/${cylinder.id}`} className="inline-flex min-h-12 items-center">
          {t('tag.back')}
        </Link>
      }
    >
      <div className="page-gutter grid w-full max-w-5xl gap-x-12 gap-y-6 pt-4 desk:grid-cols-2">
        <div className="flex flex-col gap-5">
          {done ? <Done>{t('rental.done')}</Done> : null}
          {rental.isError ? (
            <Failed error={rental.error} onRetry={() => void rental.refetch()} />
          ) : rental.data ? (
            <Standing view={rental.data} rented={cylinder.owner.kind === 'party'} />
          ) : (
            <RowsSkeleton rows={3} />
          )}
        </div>
        {mayWrite && rental.data && cylinder.owner.kind === 'party' ? (
          <TermsForm
            key={rental.data.items.length}
            cylinderId={cylinder.id}
            view={rental.data}
            onDone={() => setDone(true)}
          />
        ) : null}
      </div>
    </Page>
  );
}

function Standing({ view: { items, rental }, rented }: { view: RentalView; rented: boolean }) {
  const t = useMessages();
  const format = useFormat();
  const amount = useAmount();
  return (
    <>
      {rental ? (
        <section>
          <p className="type-figure text-[3rem]">{t('rental.days', { count: rental.days })}</p>
          <p className="pt-1 font-[600]">
            {t('rental.since', { day: format.day(rental.since) })}
            {rental.costs.length > 0
              ? `, ${t('rental.cost', { amount: format.list(rental.costs.map((cost) => amount(cost.amount, cost.currency))) })}`
              : ''}
          </p>
          <p className="pt-2 text-[0.9375rem] text-ink-soft">{t('rental.counting')}</p>
        </section>
      ) : (
        <Notice title={t(rented ? 'rental.none' : 'rental.notRented')}>
          {t(rented ? 'rental.noneText' : 'rental.notRentedText')}
        </Notice>
      )}
      {items.length === 0 ? null : (
        <section>
          <h2 className="type-title text-[1.25rem]">{t('rental.terms')}</h2>
          <ul className="border-t border-rule">
            {[...items].reverse().map(({ id, since, conditions }) => (
              <li key={id} className="grid grid-cols-[8rem_minmax(0,1fr)] gap-x-3 border-b border-rule-faint py-2">
                <span className="type-label text-ink-soft">{format.day(since)}</span>
                <span>
                  {conditions === null
                    ? t('rental.givenBack')
                    : [
                        conditions.deposit === null
                          ? t('rental.noDeposit')
                          : `${t('rental.deposit')} ${amount(conditions.deposit, conditions.currency)}`,
                        conditions.dailyRate === null
                          ? t('rental.noRate')
                          : `${t('rental.dailyRate')} ${amount(conditions.dailyRate, conditions.currency)}`,
                      ].join(', ')}
                </span>
              </li>
            ))}
          </ul>
        </section>
      )}
    </>
  );
}

interface Draft {
  id: string;
  what: 'terms' | 'back';
  since: string;
  deposit: string;
  depositMeans?: SeparatorMeaning | undefined;
  dailyRate: string;
  dailyRateMeans?: SeparatorMeaning | undefined;
  currency: string;
}

const SHOWN = ['/since', '/conditions/deposit', '/conditions/dailyRate', '/conditions/currency'];

function TermsForm({ cylinderId, view, onDone }: { cylinderId: string; view: RentalView; onDone: () => void }) {
  const t = useMessages();
  const firm = useSession()?.firm;
  const add = useAddRentalTerms(cylinderId);
  const [errors, setErrors] = useState<FormError[]>([]);
  const { locale } = usePreferences();
  const before = view.rental?.conditions;
  const [deposit, dailyRate] = [amountDraft(before?.deposit, locale), amountDraft(before?.dailyRate, locale)];
  const [draft, setDraft, clear] = useDraft<Draft>(`cylinder.${cylinderId}.rental`, () => ({
    id: newId(),
    what: 'terms',
    since: toDayInput(deviceNow()),
    deposit: deposit.text,
    depositMeans: deposit.means,
    dailyRate: dailyRate.text,
    dailyRateMeans: dailyRate.means,
    currency: before?.currency ?? (firm?.jurisdiction === 'EU' ? 'EUR' : 'USD'),
  }));
  const set = (change: Partial<Draft>) => setDraft((now) => ({ ...now, ...change }));
  const back = view.rental !== null && draft.what === 'back';
  const said = (pointer: string, message: string) => (errorAt(errors, pointer) ? t(message) : undefined);
  const send = () => {
    const body = {
      id: draft.id,
      since: draft.since,
      conditions: back
        ? null
        : {
            deposit: readAmount({ text: draft.deposit, means: draft.depositMeans }),
            dailyRate: readAmount({ text: draft.dailyRate, means: draft.dailyRateMeans }),
            currency: draft.currency.trim().toUpperCase(),
          },
    };
    const found = schemaErrors(addRentalTermsRequest, body);
    setErrors(found);
    if (found.length > 0) return;
    add.mutate(body, {
      onSuccess: () => {
        clear();
        onDone();
      },
      onError: (error) => setErrors(answerErrors(error)),
    });
  };
  return (
    <form
      noValidate
      className="flex flex-col"
      onSubmit={(event) => {
        event.preventDefault();
        send();
      }}
    >
      {view.rental ? (
        <ChoiceField
          label={t('rental.what')}
          name="rental-what"
          value={draft.what}
          choices={[
            { value: 'terms', label: t('rental.add') },
            { value: 'back', label: t('rental.give') },
          ]}
          onChange={(what) => set({ what: what as Draft['what'] })}
        />
      ) : (
        <h2 className="type-title text-[1.25rem]">{t('rental.add')}</h2>
      )}
      <TextField
        layout="row"
        type="date"
        label={t(back ? 'rental.onDay' : 'rental.from')}
        value={draft.since}
        error={said('/since', 'rental.dayWrong')}
        onChange={(event) => set({ since: event.target.value })}
      />
      {back ? null : (
        <>
          <AmountInput
            layout="row"
            label={t('rental.deposit')}
            draft={{ text: draft.deposit, means: draft.depositMeans }}
            error={said('/conditions/deposit', 'rental.amountWrong')}
            onChange={({ text, means }) => set({ deposit: text, depositMeans: means })}
          />
          <AmountInput
            layout="row"
            label={t('rental.dailyRate')}
            draft={{ text: draft.dailyRate, means: draft.dailyRateMeans }}
            error={said('/conditions/dailyRate', 'rental.amountWrong')}
            onChange={({ text, means }) => set({ dailyRate: text, dailyRateMeans: means })}
          />
          <TextField
            layout="row"
            maxLength={3}
            autoCapitalize="characters"
            label={t('rental.currency')}
            value={draft.currency}
            error={said('/conditions/currency', 'rental.currencyWrong')}
            onChange={(event) => set({ currency: event.target.value })}
          />
        </>
      )}
      <div className="flex flex-col gap-3 pt-2">
        {errorsElsewhere(errors, SHOWN).map((message) => (
          <FieldError key={message}>{message}</FieldError>
        ))}
        <Button kind="act" wide type="submit" busy={add.isPending}>
          {t(back ? 'rental.giveAct' : 'rental.act')}
        </Button>
      </div>
    </form>
  );
}
