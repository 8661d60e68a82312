import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('the Sunday on which summer time begins, at noon', '2026-03-29T11:00:00Z')
