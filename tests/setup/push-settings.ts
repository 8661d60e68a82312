import webPush from 'web-push'
import type { FakePushService } from '@/tests/setup/fake-push-service'

/** Settings for a process whose pushes go to the fake service. To be set before anything reads them. */
export function pushSettings(service: FakePushService): { vapidPublicKey: string } {
  const { publicKey, privateKey } = webPush.generateVAPIDKeys()
  Object.assign(process.env, {
    NEXTAUTH_SECRET: 'a secret of the tests, long enough',
    NEXTAUTH_URL: 'http://localhost:3000',
    UV_THREADPOOL_SIZE: '16',
    VAPID_PUBLIC_KEY: publicKey,
    VAPID_PRIVATE_KEY: privateKey,
    VAPID_SUBJECT: 'mailto:shellroom@marramlane.example',
    PUSH_EXTRA_HOSTS: service.host,
    PUSH_CA_FILE: service.caFile,
  })
  return { vapidPublicKey: publicKey }
}
