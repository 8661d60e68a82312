/** Whether two names that somebody typed would be told apart by nobody: capitals and outer spaces do not count. */
export const isSameName = (one: string, other: string): boolean => one.trim().toLocaleLowerCase() === other.trim().toLocaleLowerCase()
