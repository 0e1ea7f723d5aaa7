import { createInstance } from 'i18next'
import { catalogue } from '@/shared/words/catalogue'

const instance = createInstance({
  lng: 'en',
  fallbackLng: 'en',
  resources: { en: { translation: catalogue.en } },
  interpolation: { escapeValue: false },
})
void instance.init({ initAsync: false })

/** Words of documents and mail, from the same catalogue as the screens. */
export function say(key: string, values: Record<string, string | number> = {}): string {
  return instance.t(key, values)
}
