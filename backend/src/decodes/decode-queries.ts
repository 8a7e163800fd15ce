import type { DecodeSummary, IssueHint } from '#shared/api/decodes';
import type { DecodeResult, Hint } from '#shared/decode';
import type { Services } from '../http/services.js';

interface SummaryRow extends Omit<DecodeSummary, 'queuedAt' | 'finishedAt' | 'error'> {
  queuedAt: Date; finishedAt: Date | null; errorCode: string | null; errorMessage: string | null;
}

const SUMMARY = `
  select d.id, d.number, d.state, d.step, d.progress, d.requested_by_name as "requestedBy", d.queued_at as "queuedAt", d.finished_at as "finishedAt",
    (select f.name from decode_inputs n join files f on f.id = n.file_id where n.decode_id = d.id and n.role = 'capture') as "captureName",
    d.engine_version as "engineVersion", d.error_code as "errorCode", d.error_message as "errorMessage", d.input_withdrawn as "inputWithdrawn"
  from decodes d`;

function summary({ errorCode, errorMessage, queuedAt, finishedAt, ...row }: SummaryRow): DecodeSummary {
  return {
    ...row, queuedAt: queuedAt.toISOString(), finishedAt: finishedAt?.toISOString() ?? null,
    error: errorCode ? { code: errorCode, message: errorMessage ?? '' } : null,
  };
}

export async function decodesOf(services: Services, issueId: string): Promise<DecodeSummary[]> {
  const rows = await services.database.rows<SummaryRow>(`${SUMMARY} where d.issue_id = $1 order by d.queued_at desc`, [issueId]);
  return rows.map(summary);
}

export async function decodeById(services: Services, decodeId: string): Promise<DecodeSummary | null> {
  const row = await services.database.row<SummaryRow>(`${SUMMARY} where d.id = $1`, [decodeId]);
  return row ? summary(row) : null;
}

/** The result as the caller's party may read it: its own version where one was made for it, else that for everyone. */
export async function resultFor(services: Services, decodeId: string): Promise<DecodeResult | null> {
  const row = await services.database.row<{ result: DecodeResult }>(`
    select result from decode_results where decode_id = $1 order by audience_party_id nulls last limit 1`, [decodeId]);
  return row?.result ?? null;
}

interface HintRow { id: string; decodeId: string; decodeNumber: number; rank: number; verdicts: IssueHint['verdicts'] }

/** Hints of one decode, worded within the caller's reach, with what people said of them. */
export async function hintsOf(services: Services, decode: { id: string; result: DecodeResult | null }, mayJudge: boolean): Promise<IssueHint[]> {
  const rows = await services.database.rows<HintRow>(`
    select h.id, h.decode_id as "decodeId", d.number as "decodeNumber", h.rank,
      coalesce((select json_agg(json_build_object('verdict', v.verdict, 'by', v.person_name, 'party', v.party_name, 'reason', v.reason,
        'at', to_char(v.at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')) order by v.at)
        from hint_verdicts v where v.hint_id = h.id), '[]') as verdicts
    from hints h join decodes d on d.id = h.decode_id where h.decode_id = $1 order by h.rank`, [decode.id]);
  return rows.flatMap(({ rank, ...row }) => {
    const said: Hint | undefined = decode.result?.hints.find((hint, at) => (hint['rank'] ?? at) === rank);
    return said ? [{ ...said, ...row, actions: { judge: mayJudge } }] : [];
  });
}
