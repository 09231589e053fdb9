import 'server-only';
import { READING_STEPS, type ReadingState } from '@/lib/domain/life-cycle';
import { placeStrip } from '@/lib/domain/placed-strip';
import type { FindingWord, Strip } from '@/lib/domain/reading-result';
import type { ScanStrip } from '@/lib/domain/scan-result';
import type { Judgement, Medium } from '@/lib/domain/specification';
import type { Length, ReadingBrief } from '@/lib/domain/views';

/** The columns of a reading a list needs; the curves stay where they are. */
export const BRIEF_COLUMNS = `
  r.id AS r_id, r.number AS r_number, st.status AS r_status, st.version AS r_version, r.medium AS r_medium,
  r.value_nm AS r_value_nm, r.u_nm AS r_u_nm, r.expanded_nm AS r_expanded_nm, r.k AS r_k,
  r.judgement_json AS r_judgement, r.word AS r_word, r.word_text AS r_word_text, r.order_centres AS r_order_centres,
  r.spacing_px AS r_spacing_px, r.u_spacing_px AS r_u_spacing_px, r.scale_um_per_px AS r_scale,
  r.zero_along_px AS r_zero, r.spacing_mm AS r_spacing_mm,
  r.u_spacing_mm AS r_u_spacing_mm, r.zero_mm AS r_zero_mm, rr.strip_json AS r_strip, r.made_at AS r_made_at, mb.id AS r_made_by, mb.name AS r_made_by_name,
  (SELECT MAX(n.number) FROM readings n WHERE n.replaces_id = r.id) AS r_followed_by`;

/** Joins for a query that has `r`; LEFT so that frames without a reading stay. */
export const BRIEF_JOINS = `
  LEFT JOIN reading_states st ON st.reading_id = r.id
  LEFT JOIN reading_results rr ON rr.reading_id = r.id
  LEFT JOIN people mb ON mb.id = r.made_by`;

export interface BriefColumns {
  r_id: number | null;
  r_number: number;
  r_status: ReadingState;
  r_version: number;
  r_medium: Medium;
  r_value_nm: number | null;
  r_u_nm: number | null;
  r_expanded_nm: number | null;
  r_k: number | null;
  r_judgement: string | null;
  r_word: FindingWord;
  r_word_text: string;
  r_order_centres: number;
  r_spacing_px: number | null;
  r_u_spacing_px: number | null;
  r_scale: number | null;
  r_zero: number | null;
  r_spacing_mm: number | null;
  r_u_spacing_mm: number | null;
  r_zero_mm: number | null;
  r_strip: string;
  r_made_at: Date;
  r_made_by: number | null;
  r_made_by_name: string | null;
  r_followed_by: number | null;
}

export function briefOf(row: BriefColumns): ReadingBrief | null {
  if (row.r_id === null) return null;
  return {
    id: row.r_id,
    number: row.r_number,
    status: row.r_status,
    version: row.r_version,
    wavelengthNm: row.r_value_nm,
    uNm: row.r_u_nm,
    expandedNm: row.r_expanded_nm,
    k: row.r_k,
    medium: row.r_medium,
    judgement: row.r_judgement ? (JSON.parse(row.r_judgement) as Judgement) : null,
    word: row.r_word,
    wordText: row.r_word_text,
    orderCentres: row.r_order_centres,
    spacing: spacingOf(row),
    strip: placeStrip(
      JSON.parse(row.r_strip) as Strip | ScanStrip,
      row.r_zero_mm ?? row.r_zero ?? 0,
      row.r_scale ?? 0,
    ),
    madeBy:
      row.r_made_by !== null && row.r_made_by_name !== null
        ? { id: row.r_made_by, name: row.r_made_by_name }
        : null,
    madeAt: row.r_made_at.toISOString(),
    // A signed reading keeps its state when a correction follows it.
    correctedBy: row.r_status === READING_STEPS.accept.to ? row.r_followed_by : null,
  };
}

function spacingOf(row: BriefColumns): Length {
  return row.r_spacing_mm === null
    ? { value: row.r_spacing_px ?? 0, u: row.r_u_spacing_px ?? 0, unit: 'px' }
    : { value: row.r_spacing_mm, u: row.r_u_spacing_mm ?? 0, unit: 'mm' };
}
