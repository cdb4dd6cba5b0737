/**
 * From here on every file and folder this process makes can be read by its own user alone: databases,
 * their journals, backups and mails hold names and hashes.
 */
export function keepFilesPrivate(): void {
  process.umask(0o077);
}
