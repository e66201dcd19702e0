/** `panewise help TOPIC`. */
import { jsonText } from '../formats/write-json.ts'
import { briefSchema } from '../plan/project/brief-schema.ts'
import { helpCodes } from './help-codes.ts'
import { helpFormats } from './help-formats.ts'

/** The text on a topic, null where there is none. */
export function helpTopic(topic: string): string | null {
  switch (topic) {
    case 'brief':
      return `${jsonText(briefSchema)}\n`
    case 'formats':
      return helpFormats
    case 'codes':
      return helpCodes
    default:
      return null
  }
}
