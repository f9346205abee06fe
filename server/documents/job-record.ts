import type { GroupView } from '../../shared/entries/entry.schema.ts';
import type { RecoveryLevel } from '../../shared/ledger/recovery-level.schema.ts';
import { chargeSheetsRepository } from '../charge-sheets/charge-sheet.repository.ts';
import { findGroupView } from '../entries/group-view.repository.ts';
import { jobsRepository } from '../jobs/job.repository.ts';
import { type DocumentFrame, openPaper } from './document-frame.ts';
import { entryColumns, entryTableRow } from './entry-rows.ts';
import type { Paper } from './paper.ts';
import { findUnit, siteOf, unitFacts } from './unit-papers.ts';
import type { Words } from './words.ts';

/** What was done in one job: the charge as it was worked out, each reading of the scale, each mass, each statement. */
export async function jobRecord(frame: DocumentFrame, jobId: string): Promise<number | null> {
  const { manager, words, actor } = frame;
  const job = await jobsRepository(manager).findView(jobId);
  const unit = job && (await findUnit(frame, job.unitId));
  if (!job || !unit) return null;
  const site = await siteOf(frame, unit.siteId);
  const zone = site?.timeZone ?? frame.firm.timeZone;
  const ids = await manager.query<{ id: string }[]>(
    'select id from entry_group where job_id = $1 order by occurred_at, sequence',
    [jobId],
  );
  const groups: GroupView[] = [];
  for (const { id } of ids) {
    const group = await findGroupView(manager, id, actor.locale);
    if (group) groups.push(group);
  }
  const subject = `${words.say(`job.${job.kind}`)}${job.title ? `: ${job.title}` : ''}, ${unit.tag}`;
  const paper = await openPaper(frame, { title: words.say('jobRecord.title'), subject, link: `/units/${unit.id}` });
  paper.facts([
    [words.say('jobRecord.opened'), words.instant(job.openedAt, zone)],
    [words.say('jobRecord.closed'), job.closedAt ? words.instant(job.closedAt, zone) : words.say('jobRecord.open')],
    [
      words.say('jobRecord.people'),
      [...new Set(groups.map(({ recordedByName }) => recordedByName))].join(', ') || null,
    ],
  ]);
  unitFacts(frame, paper, unit, site);
  const sheets = await sheetsOf(frame, jobId);
  for (const sheet of sheets) {
    paper.heading(words.say('jobRecord.sheet', { at: words.instant(sheet.madeAt, zone) }));
    const manual = sheet.manual && [sheet.manual.document, sheet.manual.page].filter(Boolean).join(', ');
    if (manual) paper.paragraph(words.say('jobRecord.manual', { manual }), { size: 8.5 });
    paper.table(
      [
        { head: words.say('col.step'), width: 34 },
        { head: words.say('col.arithmetic'), width: 40 },
        { head: words.say('col.gives'), width: 14, align: 'right' },
      ],
      words.arithmetic(sheet.result.steps).map((cells) => ({ cells })),
    );
    paper.space(6);
    paper.facts([
      [words.say('jobRecord.weighIn'), words.mass(sheet.result.weighInG)],
      [words.say('jobRecord.total'), words.mass(sheet.result.totalG)],
      [words.say('jobRecord.madeBy'), sheet.madeByName],
    ]);
  }
  const entries = groups.flatMap((group) => group.entries);
  paper.heading(words.say('jobRecord.entries'));
  if (entries.length === 0) paper.paragraph(words.say('jobRecord.none'));
  else
    paper.table(
      entryColumns(words),
      entries.map((entry) => entryTableRow(words, entry)),
    );
  readingsOf(frame, paper, groups);
  statementsOf(frame, paper, groups);
  paper.heading(words.say('jobRecord.signed'));
  paper.facts([
    [words.say('jobRecord.technician'), null],
    [words.say('jobRecord.customer'), null],
    [words.say('jobRecord.date'), null],
  ]);
  await paper.end();
  return entries.length;
}

async function sheetsOf({ manager }: DocumentFrame, jobId: string) {
  const rows = await manager.query<{ id: string }[]>('select id from charge_sheet where job_id = $1 order by made_at', [
    jobId,
  ]);
  const sheets = [];
  for (const { id } of rows) {
    const sheet = await chargeSheetsRepository(manager).findView(id);
    if (sheet) sheets.push(sheet);
  }
  return sheets;
}

function readingsOf({ words }: DocumentFrame, paper: Paper, groups: readonly GroupView[]): void {
  const readings = groups.flatMap((group) => group.readings.map((reading) => ({ group, reading })));
  if (readings.length === 0) return;
  paper.heading(words.say('jobRecord.readings'));
  paper.table(
    [
      { head: words.say('col.when'), width: 18 },
      { head: words.say('col.cylinder'), width: 14 },
      { head: words.say('col.moment'), width: 12 },
      { head: words.say('col.reading'), width: 14, align: 'right' },
      { head: words.say('col.scale'), width: 18 },
      { head: words.say('col.steps'), width: 12, align: 'right' },
    ],
    readings.map(({ group, reading }) => ({
      struck: group.reversedByGroupId !== null,
      cells: [
        words.instant(reading.readAt, group.timeZone),
        reading.cylinderTag,
        words.say(`moment.${reading.moment}`),
        `${reading.value} ${reading.unit}`,
        reading.toolName ?? words.say('noScale'),
        reading.resolutionG === null ? '' : words.scaleStep(reading.resolutionG),
      ],
    })),
  );
}

function statementsOf({ words }: DocumentFrame, paper: Paper, groups: readonly GroupView[]): void {
  const said = groups.flatMap((group) => group.statements.map((statement) => ({ group, statement })));
  const remarks = groups.filter(({ reason, note }) => reason !== null || note !== null);
  if (said.length + remarks.length === 0) return;
  paper.heading(words.say('jobRecord.said'));
  for (const { group, statement } of said) {
    const by = statement.by ? `, ${words.say(`by.${statement.by}`)}` : '';
    paper.paragraph(
      `${words.instant(group.occurredAt, group.timeZone)}: ${words.say(`is.${statement.is}`)}${by} (${group.recordedByName})`,
    );
    if (group.recoveryLevel) paper.paragraph(levelWords(words, group.recoveryLevel));
  }
  for (const { occurredAt, timeZone, reason, note, recordedByName } of remarks)
    paper.paragraph(
      `${words.instant(occurredAt, timeZone)}: ${[reason, note].filter(Boolean).join(' / ')} (${recordedByName})`,
    );
}

/** What was reached, what was required, by which clause; an exception in its own words. */
function levelWords(words: Words, { required, reached, exception, clause }: RecoveryLevel): string {
  const of = (level: RecoveryLevel['required']) => words.say(`level.${level.unit}`, { value: level.value });
  const said = words.say('jobRecord.level', {
    reached: reached ? of(reached) : words.say('level.notTold'),
    required: of(required),
    clause,
  });
  return exception ? `${said} ${words.say(`level.exception.${exception}`)}` : said;
}
