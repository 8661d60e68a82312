import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('the Sunday on which summer time ends, after noon', '2026-10-25T12:20:00Z')
