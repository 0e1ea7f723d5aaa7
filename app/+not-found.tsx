import { NotFoundScreen } from '@/modules/ui/not-found-screen'

export default NotFoundScreen
