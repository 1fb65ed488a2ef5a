/** The id of the input of a named field; a form's error summary and its fields agree on it. */
export function fieldId(name: string): string {
  return `field-${name.replaceAll(/[^A-Za-z0-9]+/g, '-')}`
}
