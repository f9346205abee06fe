import { useQuery } from '@tanstack/react-query';
import { Link, type LoaderFunctionArgs, useLoaderData } from 'react-router-dom';
import { chargeSheetQueries } from '../../api/charge-sheets.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { unitQueries } from '../../api/units.ts';
import { useFormat } from '../../lib/format.ts';
import { loadMessages, type Translate, useMessages } from '../../lib/messages.ts';
import { Beam } from '../../ui/beam/beam.tsx';
import { chargeBeam } from '../../ui/beam/presets.ts';
import { useBeamUnit } from '../../ui/beam/use-beam-unit.ts';
import { Button, ButtonLink } from '../../ui/button.tsx';
import { Caution } from '../../ui/caution.tsx';
import { Figure } from '../../ui/figure.tsx';
import { Notice } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { Fact, Part } from './part.tsx';
import { SheetInputs } from './sheet-inputs.tsx';
import { SheetSteps } from './sheet-steps.tsx';
import './charge-sheet.css';

export async function loader({ params, request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('units-screen', 'charge')]);
  const sheet = await queryClient.ensureQueryData(chargeSheetQueries.one(String(params.sheetId)));
  const unit = await queryClient.ensureQueryData(unitQueries.one(sheet.unitId));
  return { sheet, unit };
}

const NAMED_VERSIONS = ['chargeRules', 'gwp', 'tubes', 'refrigerants'];

/** `saturation/R-32`: which table or rule a version is of, in words; what has none yet keeps its name. */
function versionWords(t: Translate, name: string): string {
  const [table = '', of] = name.split('/');
  if (of !== undefined && table === 'saturation') return t('units.sheet.version.saturation', { refrigerant: of });
  return NAMED_VERSIONS.includes(name) ? t(`units.sheet.version.${name}`) : name;
}

/** A charge sheet as it was made: inputs, every step, result, versions and hash. It never changes. */
export function Component() {
  const t = useMessages();
  const format = useFormat();
  const beamUnit = useBeamUnit();
  const loaded = useLoaderData<typeof loader>();
  const { sheet } = loaded;
  const unit = useQuery({ ...unitQueries.one(loaded.unit.id), initialData: loaded.unit }).data;
  const mayPost = usePermission('entries:post');
  const { result, request } = sheet;
  const said = (key: string, massG: number) => ({ massG, label: t(key, { mass: format.mass(massG) }) });
  const factory = said('units.sheet.factory', request.basis.factoryChargeG);
  const extra = said('units.sheet.extra', result.totalG - request.basis.factoryChargeG);
  const total = said('units.sheet.total', result.totalG);
  const shown = result.cautions.filter(({ code }) => code !== 'manualGoverns');
  const governs = result.cautions.find(({ code }) => code === 'manualGoverns');
  return (
    <Page
      title={t('units.sheet.title', { tag: unit.tag })}
      lead={
        <>
          <Link to={`/units/${unit.id}`}>{unit.name}</Link>, {unit.siteName}, {unit.customerName}
        </>
      }
      actions={
        <span className="flex flex-wrap gap-3 print:hidden">
          <Button onClick={() => window.print()}>{t('units.sheet.print')}</Button>
          {mayPost && result.weighInG > 0 ? (
            <ButtonLink kind="act" to={`/units/${unit.id}/weigh-in?sheet=${sheet.id}`}>
              {t('units.sheets.weighIn', { mass: format.mass(result.weighInG) })}
            </ButtonLink>
          ) : null}
        </span>
      }
    >
      <div
        id="charge-sheet"
        className="page-gutter grid gap-x-14 gap-y-8 pt-4 lg:grid-cols-[minmax(0,3fr)_minmax(0,2fr)] print:block print:space-y-6"
      >
        <div className="flex min-w-0 flex-col gap-7">
          <div>
            <p className="type-label text-ink-soft">
              {t('units.sheet.totalOf', { refrigerant: request.basis.refrigerant })}
            </p>
            <p className="type-figure text-[clamp(2.75rem,14vw,4.25rem)]">
              <Figure pieces={format.massPieces(result.totalG)} />
            </p>
            <p className="pt-1.5 text-[1.1875rem] font-[620] text-move">{whatToDo()}</p>
            {result.co2eT === null ? null : (
              <p className="type-label text-ink-soft">
                {t('units.sheet.co2e', { mass: format.tonnes(result.co2eT), gwpSet: result.gwpSet })}
              </p>
            )}
            <Beam
              spec={chargeBeam({ factory, extra, total }, beamUnit)}
              summary={`${factory.label}, ${extra.label}, ${total.label}.`}
              className="pt-3"
            />
          </div>
          <SheetSteps steps={result.steps} />
          {result.warnings.map((warning) => (
            <Notice key={warning.code + warning.message} title={warning.message} />
          ))}
          {shown.map((caution) => (
            <Caution key={caution.code} signal={caution.signal}>
              {caution.message}
            </Caution>
          ))}
          {governs ? (
            <p className="border-t border-rule pt-3 text-[0.9375rem] text-ink-soft">{governs.message}</p>
          ) : null}
        </div>
        <div className="flex min-w-0 flex-col gap-7">
          <SheetInputs sheet={sheet} />
          <Part title={t('units.sheet.record')}>
            <dl>
              <Fact name={t('units.sheet.made')}>
                {format.longDateTime(sheet.madeAt)}, {sheet.madeByName}
              </Fact>
              {Object.entries(result.versions).map(([name, version]) => (
                <Fact key={name} name={versionWords(t, name)}>
                  <span className="font-mono text-[0.875rem]">{version}</span>
                </Fact>
              ))}
              {sheet.recordHash ? (
                <Fact name={t('units.sheet.hash')}>
                  <span className="font-mono text-[0.875rem] break-all">{sheet.recordHash}</span>
                </Fact>
              ) : null}
            </dl>
          </Part>
        </div>
      </div>
    </Page>
  );

  function whatToDo(): string {
    if (result.recoverG > 0) return t('units.sheet.recover', { mass: format.mass(result.recoverG) });
    if (result.weighInG > 0) return t('units.sheet.weighIn', { mass: format.mass(result.weighInG) });
    return t('units.sheet.nothing');
  }
}
