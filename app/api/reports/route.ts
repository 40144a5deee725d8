import { listReports } from '@/lib/server/reports';
import { route } from '@/lib/server/route';

export const GET = route({ access: 'report.read' }, ({ actor }) => listReports(actor));
