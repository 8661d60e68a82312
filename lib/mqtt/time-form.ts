/** How a message tells when it was measured; 'arrival': not at all. */
export const TIME_FORMS = ['arrival', 'iso', 'epoch s', 'epoch ms'] as const
export type TimeForm = (typeof TIME_FORMS)[number]
