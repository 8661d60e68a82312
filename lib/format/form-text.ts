/** The text of one field of a form, without spaces around it; empty where the field is missing. */
export function formText(form: FormData, name: string): string {
  const value = form.get(name)
  return typeof value === 'string' ? value.trim() : ''
}
