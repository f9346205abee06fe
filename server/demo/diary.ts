import { demoId } from './demo-id.ts';
import type { DemoOrder, DiaryLine, GroupBody } from './demo-order.ts';
import { Draws } from './draws.ts';

/** When something happened, and who did it. */
export interface Moment {
  at: Date;
  by: string;
}

export const minutesAfter = (at: Date, minutes: number): Date => new Date(at.getTime() + minutes * 60_000);
export const laterBy = ({ at, by }: Moment, minutes: number): Moment => ({ at: minutesAfter(at, minutes), by });

/** Everything that the people of one firm send to the server, to be played in the order in which it arrives. */
export class Diary {
  private readonly lines: DiaryLine[] = [];
  private readonly draws: Draws;

  constructor(firmName: string) {
    this.draws = new Draws(`${firmName}, ids`);
  }

  id(at: Date): string {
    return demoId(at, this.draws);
  }

  write({ at, by }: Moment, order: DemoOrder): void {
    this.lines.push({ recordedAt: at, by, order });
  }

  /** A group that happened at the moment and is sent some minutes later. */
  post(
    { at, by }: Moment,
    body: Omit<GroupBody, 'groupId' | 'schema' | 'occurredAt'> & { occurredAt?: string },
    sentAfterMinutes = 4,
  ): string {
    const groupId = this.id(at);
    const request: GroupBody = { groupId, schema: 1, occurredAt: at.toISOString(), ...body };
    this.write({ at: minutesAfter(at, sentAfterMinutes), by }, { call: 'postGroup', request });
    return groupId;
  }

  /** The body of a group that was posted. */
  bodyOf(groupId: string): GroupBody {
    for (const { order } of this.lines) {
      if (order.call === 'postGroup' && order.request.groupId === groupId) return order.request;
    }
    throw new Error(`group ${groupId} was not posted`);
  }

  inOrder(): DiaryLine[] {
    return this.lines.toSorted((a, b) => a.recordedAt.getTime() - b.recordedAt.getTime());
  }
}
