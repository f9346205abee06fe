import { type Answers, type FormContext, type MassDraft, typedOf, type WeighedRow } from './answers.ts';
import { isEmptied } from './emptied.ts';
import type { Question } from './form.ts';
import { fallsShort, levelAsked, levelOf } from './level.ts';
import { rowDangers } from './row-dangers.ts';
import { difference, isBelowZero, isZero } from './typed-mass.ts';
import { contentOf, massOutOf } from './weighed-rows.ts';

/** What is missing or cannot be, at its blank. `params` are figures as typed. */
export interface Complaint {
  field: string;
  key: string;
  params?: Record<string, string | number>;
}

const need = (field: string, what: string): Complaint => ({ field, key: `record.need.${what}` });
const shown = (draft: MassDraft) => `${draft.text.trim()} ${draft.unit}`;

export function complaintsOf(question: Question, answers: Answers, context: FormContext): Complaint[] {
  switch (question.is) {
    case 'unit':
      return answers.unitId ? [] : [need('unitId', 'unit')];
    case 'choice':
      if (!question.options.includes(answers.choice)) return [need('choice', 'choice')];
      return question.wrong ? [question.wrong] : [];
    case 'site':
      return answers.siteId ? [] : [need('siteId', 'site')];
    case 'emptied':
      return !context.unit || isEmptied(context.unit) ? [] : [{ field: 'emptied', key: 'record.wrong.notEmpty' }];
    case 'refrigerant':
      if (!answers.refrigerant) return [need('refrigerant', 'refrigerant')];
      return answers.refrigerant === context.unit?.refrigerant
        ? [{ field: 'refrigerant', key: 'record.wrong.sameRefrigerant' }]
        : [];
    case 'fullCharge':
      return massComplaints('mass', answers.mass, 'mass', context);
    case 'rows':
      return [...rowComplaints(question, answers, context), ...dangerComplaints(question, answers, context)];
    case 'mass':
      return massComplaints('mass', answers.mass, 'mass', context);
    case 'party':
      return answers.partyId || (question.of === 'customer' && context.unit) ? [] : [need('partyId', question.of)];
    case 'document':
      return documentComplaints(question.required, answers);
    case 'certified':
      return certifiedComplaints(answers, context);
    case 'level':
      return levelComplaints(answers, context);
    case 'purchase':
      return [
        ...(answers.rows[0]?.cylinderId ? [] : [need('rows.0.cylinderId', 'cylinder')]),
        ...(answers.aboutGroupId && context.purchase ? [] : [need('aboutGroupId', 'purchase')]),
      ];
    case 'reason':
      return answers.reason.trim() ? [] : [need('reason', 'reason')];
    case 'text':
      return question.required && !answers.note.trim() ? [need('note', 'text')] : [];
    case 'moment':
      return context.instant(answers.at) ? [] : [need('at', 'moment')];
    case 'fullness':
      return [];
  }
}

/** A blank that holds something unreadable explains itself: the complaint has no words of its own. */
function massComplaints(field: string, draft: MassDraft, what: string, context: FormContext): Complaint[] {
  if (draft.text.trim() === '' && !draft.held) return [need(field, what)];
  return typedOf(draft, context) ? [] : [{ field, key: '' }];
}

function rowComplaints(
  question: Extract<Question, { is: 'rows' }>,
  answers: Answers,
  context: FormContext,
): Complaint[] {
  const { direction } = question;
  return answers.rows.flatMap((row, index) => {
    const at = `rows.${index}`;
    const found: Complaint[] = [];
    if (!row.cylinderId) found.push(need(`${at}.cylinderId`, 'cylinder'));
    else if (answers.rows.findIndex(({ cylinderId }) => cylinderId === row.cylinderId) !== index) {
      found.push({ field: `${at}.cylinderId`, key: 'record.wrong.twice' });
    }
    if (direction === 'once') return [...found, ...onceComplaints(question, row, at, context)];
    const fills = direction === 'into' || (direction === 'transfer' && index === 1);
    const readings = [
      ...(row.mode === 'zeroed' ? [] : massComplaints(`${at}.before`, row.before, 'reading', context)),
      ...massComplaints(`${at}.after`, row.after, 'reading', context),
    ];
    if (readings.length === 0) found.push(...orderComplaints(row, at, fills, context));
    return [...found, ...readings, ...hoseComplaints(row, at, question, context)];
  });
}

/** A cylinder that is filled does not become lighter, one that is drawn from not heavier. */
function orderComplaints(row: WeighedRow, at: string, fills: boolean, context: FormContext): Complaint[] {
  const [before, after] = [typedOf(row.before, context), typedOf(row.after, context)];
  if (!after) return [];
  if (row.mode === 'zeroed') return isZero(after) ? [{ field: `${at}.after`, key: 'record.wrong.same' }] : [];
  if (!before) return [];
  const change = difference(after, before);
  const params = { before: shown(row.before), after: shown(row.after) };
  if (isZero(change)) return [{ field: `${at}.after`, key: 'record.wrong.same', params }];
  if (isBelowZero(change) !== fills) return [];
  return [{ field: `${at}.after`, key: fills ? 'record.wrong.lighter' : 'record.wrong.heavier', params }];
}

function onceComplaints(
  { byBook }: Extract<Question, { is: 'rows' }>,
  row: WeighedRow,
  at: string,
  context: FormContext,
): Complaint[] {
  if (!row.cylinderId) return [];
  if (byBook && row.mode === 'book') {
    const content = contentOf(row, context);
    return content && isZero(content) ? [{ field: `${at}.cylinderId`, key: 'record.wrong.nothingInIt' }] : [];
  }
  const missing = massComplaints(`${at}.before`, row.before, 'reading', context);
  if (missing.length > 0) return missing;
  const content = contentOf(row, context);
  const tare = context.cylinder(row.cylinderId)?.tareTyped;
  return content && tare && (isBelowZero(content) || isZero(content))
    ? [
        {
          field: `${at}.before`,
          key: 'record.wrong.belowTare',
          params: { given: shown(row.before), tare: `${tare.value} ${tare.unit}` },
        },
      ]
    : [];
}

function hoseComplaints(
  row: WeighedRow,
  at: string,
  question: Extract<Question, { is: 'rows' }>,
  context: FormContext,
): Complaint[] {
  if (!question.hose || !row.hasHose) return [];
  const content = massComplaints(`${at}.hose`, row.hose, 'hose', context);
  if (content.length > 0) return content;
  if (row.hoseEnd === 'recovered' && !row.hoseInto) return [need(`${at}.hoseInto`, 'cylinder')];
  const rest = question.direction === 'outOf' ? massOutOf(row, context) : null;
  return rest && isBelowZero(rest)
    ? [{ field: `${at}.hose`, key: 'record.wrong.hoseTooMuch', params: { given: shown(row.hose) } }]
    : [];
}

/** What must not be done is not planned; done already, it is told with its reason. */
function dangerComplaints(question: Question, answers: Answers, context: FormContext): Complaint[] {
  if (rowDangers(question, answers, context).length === 0) return [];
  if (!answers.happened) return [{ field: 'happened', key: 'record.danger.stopped' }];
  return answers.reason.trim() ? [] : [need('reason', 'reason')];
}

function documentComplaints(required: boolean, { documentNumber, documentDate }: Answers): Complaint[] {
  const isGiven = documentNumber.trim() !== '';
  return [
    ...(required && !isGiven ? [need('documentNumber', 'documentNumber')] : []),
    ...((required || isGiven) && !documentDate ? [need('documentDate', 'documentDate')] : []),
  ];
}

function certifiedComplaints(answers: Answers, context: FormContext): Complaint[] {
  return answers.certified.flatMap((row, index) => [
    ...(row.refrigerant ? [] : [need(`certified.${index}.refrigerant`, 'refrigerant')]),
    ...massComplaints(`certified.${index}.sent`, row.sent, 'mass', context),
    ...massComplaints(`certified.${index}.certified`, row.certified, 'mass', context),
  ]);
}

function levelComplaints(answers: Answers, context: FormContext): Complaint[] {
  const required = levelAsked(answers, context);
  if (!required) return [];
  const reached = levelOf(answers);
  if (answers.levelReached.trim() !== '' && reached === null) {
    return [{ field: 'levelReached', key: 'record.wrong.level', params: { given: answers.levelReached.trim() } }];
  }
  if (reached === null && answers.levelException === '') return [need('levelReached', 'level')];
  if (fallsShort(answers, context)) {
    return [
      {
        field: 'levelReached',
        key: `record.wrong.notDeep.${required.unit}`,
        params: { given: reached ?? 0, allowed: required.value },
      },
    ];
  }
  return answers.levelException === 'other' && !answers.reason.trim() ? [need('reason', 'reason')] : [];
}
