/** Why a copy was made; how long it is kept follows from it. As the CHECK of the table has them. */
export const BACKUP_KINDS = ['hourly', 'daily', 'monthly', 'by hand', 'before an upgrade'] as const
export type BackupKind = (typeof BACKUP_KINDS)[number]
