import type { DemoInfo } from '../app-services'
import { quillbrook } from './company'

export const demoPassword = 'drain-by-drain'

/** Whom one may sign in as; who has left is not among them. */
export const demoInfo: DemoInfo = {
  password: demoPassword,
  people: quillbrook.people
    .filter(({ name }) => name !== 'Teo Marbach')
    .map(({ name, email, role, does }) => ({ name, email, role, does })),
}
