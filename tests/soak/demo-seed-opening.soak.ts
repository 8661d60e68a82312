import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('a Monday a minute after opening', '2026-12-07T07:01:00Z')
