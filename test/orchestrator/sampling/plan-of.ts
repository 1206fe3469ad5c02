import { readScan } from '../../../orchestrator/scan/read-scan.js';
import type { Plan } from '../../../orchestrator/scan/plan.js';

/** The plan of a scan file of the Standard Model given as text. */
export function planOf(text: string): Plan {
  return readScan(new TextEncoder().encode(`model: sm\n${text}`), 'test.yaml').plan;
}
