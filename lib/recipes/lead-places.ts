/** Where a lead probe may sit and how; apart from the schemas, so that a form's choices need not bring those along. */
export const leadHeights = ['bilge', 'quarter', 'head end', 'head'] as const
export const leadMountings = ['wedge', 'drilled', 'clamped'] as const
