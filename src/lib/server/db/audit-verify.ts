import { Op } from 'sequelize';
import { chainStart, checkLink, type BrokenLink, type ChainState } from './audit-chain';
import { AuditEvent } from './models/audit-event';

/** What walking one lab's chain found. */
export interface ChainReport {
  readonly labId: string;
  /** Events that hold, counted from the first. */
  readonly verified: number;
  /** Hash of the last event that holds. */
  readonly lastHash: string;
  readonly broken: BrokenLink | null;
}

const pageSize = 1000;

/** Walks the audit chain of a lab from its first event and stops at the first link that does not hold. */
export async function verifyChain(labId: string): Promise<ChainReport> {
  let state: ChainState = { seq: 0, hash: chainStart };
  for (;;) {
    const rows = await AuditEvent.findAll({
      where: { labId, seq: { [Op.gt]: String(state.seq) } },
      order: [['seq', 'ASC']],
      limit: pageSize,
      raw: true
    });
    for (const row of rows) {
      const event = { ...row, seq: Number(row.seq), at: row.at.toISOString() };
      const broken = checkLink(state, event);
      if (broken) return { labId, verified: state.seq, lastHash: state.hash, broken };
      state = { seq: event.seq, hash: event.hash };
    }
    if (rows.length < pageSize) return { labId, verified: state.seq, lastHash: state.hash, broken: null };
  }
}
