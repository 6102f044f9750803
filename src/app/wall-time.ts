/** When a sweep was taken: the wall time on site, as files keep it. */

/** Wall time of this machine at an instant, to the minute: `2026-05-03T14:30`. */
export function wallTimeOf(instant: Date): string {
  const two = (value: number): string => String(value).padStart(2, '0');
  const date = `${instant.getFullYear()}-${two(instant.getMonth() + 1)}-${two(instant.getDate())}`;
  return `${date}T${two(instant.getHours())}:${two(instant.getMinutes())}`;
}
