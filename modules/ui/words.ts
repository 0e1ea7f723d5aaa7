import i18next from 'i18next'
import { initReactI18next } from 'react-i18next'
import { catalogue } from '@/shared/words/catalogue'

/** Every word on screen comes from the catalogue; another language is another entry in it. */
void i18next.use(initReactI18next).init({
  lng: 'en',
  fallbackLng: 'en',
  resources: { en: { translation: catalogue.en } },
  // React escapes what it shows.
  interpolation: { escapeValue: false },
  returnNull: false,
})

export const words = i18next
