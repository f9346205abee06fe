import type { Unit } from '../../../shared/unit-register/unit.schema.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Beam } from '../../ui/beam/beam.tsx';
import { unitBeam } from '../../ui/beam/presets.ts';
import { useBeamUnit } from '../../ui/beam/use-beam-unit.ts';
import { Figure } from '../../ui/figure.tsx';

/** The one number of this page: what the unit holds by its book, on the beam against its full charge. */
export function BookFigure({ unit }: { unit: Unit }) {
  const t = useMessages();
  const format = useFormat();
  const beamUnit = useBeamUnit();
  const { book, fullCharge, refrigerant } = unit;
  const shortG = fullCharge && book.known ? fullCharge.massG - book.massG : 0;
  const said = (key: string, massG: number) => ({ massG, label: t(key, { mass: format.massAbout(massG) }) });
  const bookPart = said(book.known ? 'units.beam.book' : 'units.beam.sum', book.massG);
  const lost = shortG > 0 ? said('units.beam.short', shortG) : null;
  const full = fullCharge ? said('units.beam.full', fullCharge.massG) : null;
  const others = book.byRefrigerant.filter((part) => part.refrigerant !== refrigerant && part.massG !== 0);
  return (
    <div>
      <p className="type-label text-ink-soft">
        {t(book.known ? 'units.figure.book' : 'units.figure.notKnown', { refrigerant })}
      </p>
      {book.known ? (
        <p className="type-figure text-[clamp(2.75rem,14vw,4.25rem)]">
          <Figure pieces={format.massAboutPieces(book.massG)} />
        </p>
      ) : (
        <p className="type-title pt-1 text-[1.75rem]">
          {book.massG === 0 ? t('units.figure.nothing') : t('units.figure.sum', { mass: format.massAbout(book.massG) })}
        </p>
      )}
      {shortG > 0.5 ? (
        <p className="pt-1 font-[600]">{t('units.figure.short', { mass: format.massAbout(shortG) })}</p>
      ) : null}
      {shortG < -0.5 ? (
        <p className="pt-1 font-[600]">{t('units.figure.above', { mass: format.massAbout(-shortG) })}</p>
      ) : null}
      {others.map((part) => (
        <p key={part.refrigerant} className="pt-1">
          {t('units.figure.other', { mass: format.massAbout(part.massG), refrigerant: part.refrigerant })}
        </p>
      ))}
      {book.known || fullCharge || book.massG > 0 ? (
        <Beam
          spec={unitBeam({ book: bookPart, lost, fullCharge: full }, beamUnit)}
          summary={`${[bookPart, ...(lost ? [lost] : []), ...(full ? [full] : [])].map((part) => part.label).join(', ')}.`}
          className="pt-3"
        />
      ) : null}
    </div>
  );
}
