const GROUPED = /^([+-]?\d{1,3}(?:[ '\u2019\u00a0\u202f]\d{3})+)(?!\d)/;

/**
 * A number as it is written in other lands with what all of them write: a hyphen for a minus sign (U+2212), nothing between
 * thousands that are set apart by blanks or apostrophes. Any other text stays as it is.
 */
export function plainNumber(text: string): string {
  const signed = text.startsWith('\u2212') ? `-${text.slice(1)}` : text;
  const [, groups] = GROUPED.exec(signed) ?? [];
  return groups === undefined ? signed : groups.replace(/[^\d+-]/g, '') + signed.slice(groups.length);
}
