import { SetupScreen } from '@/modules/setup/setup-screen'

export default SetupScreen
