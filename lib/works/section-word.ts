/** How a section is called: by its name, or that the work has none. */
export const sectionWord = (name: string): string => (name === '' ? 'cast in one' : name)
