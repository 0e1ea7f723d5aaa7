import api from './en/api.json'
import books from './en/books.json'
import containers from './en/containers.json'
import documents from './en/documents.json'
import drains from './en/drains.json'
import limits from './en/limits.json'
import mail from './en/mail.json'
import pickups from './en/pickups.json'
import problems from './en/problems.json'
import session from './en/session.json'
import setup from './en/setup.json'
import ui from './en/ui.json'
import units from './en/units.json'
import yard from './en/yard.json'

/** All words a person reads, by language: a language is data. */
export const catalogue = {
  en: {
    api,
    books,
    containers,
    documents,
    drains,
    limits,
    mail,
    pickups,
    problems,
    session,
    setup,
    ui,
    units,
    yard,
  },
} as const
