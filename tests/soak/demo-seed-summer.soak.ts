import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('a summer Wednesday at 14:00', '2026-07-15T13:00:00Z')
