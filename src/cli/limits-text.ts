/** The limits of a handover as a short block of text: the verdict on one line, then each limit. */
import { LIMIT_WORDS, type LimitResult, type Verdict } from '../assess/limits-check.ts';
import type { Severity } from '../locate/echo.ts';
import { wrapText } from '../plot/cells.ts';
import { SEVERITY_GLYPHS } from '../plot/line-strip.ts';
import { fixedText, frequencyText } from '../plot/quantity-text.ts';
import type { Paint } from './paint.ts';

/** Writes the block; every line at most `columns` wide. */
export function limitsLines(verdict: Verdict, columns: number, paint: Paint): string[] {
  const judged = verdict.limits.filter((limit) => limit.pass !== null);
  const open = verdict.limits.filter((limit) => limit.pass === null);
  if (judged.length === 0) return [];
  return [
    ...hanging('limits ', headText(verdict), columns),
    ...judged.flatMap((limit) => {
      const severity = severityOf(limit);
      return hanging(`${SEVERITY_GLYPHS[severity]} `, limitText(limit), columns).map((line) =>
        severity === 'sound' ? line : paint(severity, line),
      );
    }),
    ...open.flatMap((limit) => hanging('  ', `${nameOf(limit)}: not judged; ${limit.why ?? ''}`, columns)),
  ];
}

/** What of the verdict the lines under it do not say. */
function headText({ pass, limits }: Verdict): string {
  const missed = limits.filter((limit) => limit.pass === false && !limit.isDefault).length;
  if (pass === true) return 'passes';
  if (pass === null) return 'not judged';
  return missed > 0 ? `fails: ${missed} missed` : 'fails: a fault';
}

function severityOf({ pass, isDefault }: LimitResult): Severity {
  return pass === true ? 'sound' : isDefault ? 'watch' : 'fault';
}

function limitText(result: LimitResult): string {
  const { limit, limitDb, valueDb, marginDb, atHz, where, isDefault } = result;
  const origin = isDefault ? ' (common practice)' : '';
  const bound = limit === 'loss' ? 'at most' : 'at least';
  if (valueDb === null)
    return `${nameOf(result)}: nothing found; ${bound} ${fixedText(limitDb, 1)} dB${origin}`;
  const decimals = limit === 'loss' ? 2 : 1;
  const size = fixedText(Math.abs(marginDb ?? 0), decimals);
  const room = result.pass === true ? `${size} dB to spare` : `missed by ${size} dB`;
  const at = atHz === null ? '' : ` at ${frequencyText(atHz)}`;
  return (
    `${nameOf(result)}: ${fixedText(valueDb, decimals)} dB${at}, ${bound} ${fixedText(limitDb, decimals)}${origin}, ` +
    `${room}${where === null ? '' : `, ${where}`}`
  );
}

function nameOf({ limit, band }: LimitResult): string {
  return band === null ? LIMIT_WORDS[limit] : `${LIMIT_WORDS[limit]}, ${band}`;
}

function hanging(label: string, text: string, columns: number): string[] {
  return wrapText(text, columns - label.length).map(
    (line, i) => `${i === 0 ? label : ' '.repeat(label.length)}${line}`,
  );
}
