import { MailboxScreen } from '@/modules/pickups/mailbox-screen'

export default MailboxScreen
