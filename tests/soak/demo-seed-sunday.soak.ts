import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('a Sunday at noon', '2026-12-06T12:00:00Z')
