import { writeFileSync } from 'node:fs';

/**
 * Imported before a program (`node --import`), leaves in the file that `RAILPROOF_PEAK_IN` names the most memory that
 * its process ever had in use, in bytes. The program runs as it would without.
 */
const file = process.env['RAILPROOF_PEAK_IN'];
if (file !== undefined) {
  process.on('exit', () => {
    writeFileSync(file, String(process.resourceUsage().maxRSS * 1024));
  });
}
