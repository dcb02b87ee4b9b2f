/** What a form's fields hold, as the schemas want it. Nothing is judged here. */

/** The text of a field; empty when there is no such field. */
export function textOf(form: FormData, path: string): string {
  const value = form.get(path);
  return typeof value === 'string' ? value : '';
}

/** A number written with a point or a comma; `NaN`, which every schema refuses, for anything else. */
export function numberOf(form: FormData, path: string): number {
  const text = textOf(form, path)
    .trim()
    .replace(',', '.')
    .replace(/^\u2212/, '-');
  return text === '' ? Number.NaN : Number(text);
}

/** Whether a box is ticked. */
export function isTicked(form: FormData, path: string): boolean {
  return form.has(path);
}

/** The values of all boxes ticked under one name. */
export function tickedOf(form: FormData, path: string): string[] {
  return form.getAll(path).filter((value) => typeof value === 'string');
}

/** The lines of a text that are not empty. */
export function linesOf(form: FormData, path: string): string[] {
  return textOf(form, path)
    .split('\n')
    .map((line) => line.trim())
    .filter((line) => line !== '');
}
