import { useMemo } from 'react';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Beam } from '../../ui/beam/beam.tsx';
import { useBeamUnit } from '../../ui/beam/use-beam-unit.ts';
import { Caution } from '../../ui/caution.tsx';
import { Figure } from '../../ui/figure.tsx';
import { beamSummary, fullCylinderBeam } from './cylinder-beam.ts';
import type { CylinderFigures } from './use-cylinder-figures.ts';

/** The cylinder that is being typed, on its beam: what it will hold, and what that leaves. */
export function CylinderPreview({
  tag,
  refrigerant,
  tareG,
  contentG,
  limitG,
  figures,
  holds,
}: {
  tag: string;
  refrigerant: string;
  tareG: number | null;
  contentG: number | null;
  limitG: number | null;
  figures: CylinderFigures;
  holds: boolean | null;
}) {
  const t = useMessages();
  const format = useFormat();
  const unit = useBeamUnit();
  const known = tareG !== null || contentG !== null || limitG !== null;
  const shown = useMemo(
    () => ({ tag, tareG: tareG ?? 0, contentG: Math.max(contentG ?? 0, 0), limitG }),
    [tag, tareG, contentG, limitG],
  );
  const spec = useMemo(
    () => fullCylinderBeam(shown, figures.heelG, { t, format }, unit),
    [shown, figures.heelG, t, format, unit],
  );
  return (
    <aside aria-label={t('cylinders.new.preview')} className="min-w-0 lg:sticky lg:top-20 lg:self-start">
      <p className="type-label text-ink-soft">
        {[tag || t('cylinders.new.untagged'), refrigerant].filter(Boolean).join(', ')}
      </p>
      {contentG === null ? null : (
        <p className="type-figure mt-1 text-[3.25rem]">
          <Figure pieces={format.massAboutPieces(shown.contentG)} />
        </p>
      )}
      {known ? (
        <Beam className="mt-2" spec={spec} summary={beamSummary(shown, { t, format })} />
      ) : (
        <p className="mt-3 max-w-prose text-[0.9375rem] text-ink-soft">{t('cylinders.new.previewWaits')}</p>
      )}
      <div className="mt-4 flex flex-col gap-3">
        {holds === false ? <Caution signal="danger">{t('cylinders.stands.pressure')}</Caution> : null}
        {figures.cautions.map(({ code, signal, message }) => (
          <Caution key={code} signal={signal}>
            {message}
          </Caution>
        ))}
      </div>
    </aside>
  );
}
