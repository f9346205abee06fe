import type { OpenItem } from '../../../../shared/periods/periods.schema.ts';
import type { Formats } from '../../../lib/format.ts';
import type { Translate } from '../../../lib/messages.ts';
import { differencePath, handsSentence, signed, subjectWords } from '../book-words.ts';

/** What is open, in one line. */
export function itemTitle(t: Translate, format: Formats, item: OpenItem): string {
  switch (item.kind) {
    case 'difference':
      return t('books.item.difference', {
        what: subjectWords(t, item.difference),
        refrigerant: item.difference.refrigerant,
        mass: signed(format, item.difference.standsG),
      });
    case 'weighIn':
      return t('books.item.weighIn', {
        cylinder: item.cylinderTag,
        unit: item.unitLabel ? t('log.placeNamed.unit', { label: item.unitLabel }) : t('books.item.noUnit'),
      });
    case 'cylinder':
      return t('books.item.cylinder', {
        cylinder: item.cylinderTag,
        refrigerant: item.refrigerant,
        mass: format.mass(item.contentG),
      });
    case 'job':
      return t('books.item.job', { job: item.title ?? t(`books.jobKind.${item.jobKind}`), unit: item.unitLabel });
  }
}

/** What else one has to know to decide. */
export function itemDetail(t: Translate, format: Formats, item: OpenItem, timeZone: string): string {
  switch (item.kind) {
    case 'difference': {
      const { difference } = item;
      const when = format.longDateTime(difference.at, difference.timeZone);
      const hands =
        difference.subject.kind === 'cylinder'
          ? handsSentence(t, difference.heldBetween)
          : t('books.recordedBy', { who: difference.recordedByName });
      return t('books.item.difference.detail', { when, hands });
    }
    case 'weighIn':
      return t('books.item.weighIn.detail', {
        when: format.longDateTime(item.startedAt, item.timeZone),
        who: item.startedByName,
      });
    case 'cylinder': {
      const when = item.lastWeighedAt
        ? t('books.item.cylinder.last', { when: format.longDateTime(item.lastWeighedAt, timeZone) })
        : t('books.item.cylinder.never');
      return item.heldByName ? `${when} ${t('books.hands', { who: item.heldByName })}.` : when;
    }
    case 'job':
      return t('books.item.job.detail', {
        customer: item.customerName,
        when: format.longDateTime(item.openedAt, timeZone),
      });
  }
}

/** Where it is looked into or done. */
export function itemPath(item: OpenItem): string {
  switch (item.kind) {
    case 'difference':
      return differencePath(item.difference);
    case 'weighIn':
      return `/weigh-back/${item.groupId}`;
    case 'cylinder':
      return `/cylinders/${item.cylinderId}`;
    case 'job':
      return `/units/${item.unitId}`;
  }
}
