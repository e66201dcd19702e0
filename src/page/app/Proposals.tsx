/** What the reader offers and asks, whatever it is: each with its words, to be taken or left, which reads the drawing anew. */
import { proposalCodes, type Question, type Repair } from '../../base/repair.ts'
import { useDesk, useDeskState } from './context.ts'
import { taking } from '../store/opening.ts'

/** Readers name the command line's options in brackets; here the controls stand beside the sentence. */
export const withoutOptions = (text: string): string => text.replace(/ \([^()]*--[^()]*\)/g, '').replace(/\s*\u2013 --\S+/g, '')

/** An option of a question in words. */
export function optionWords(option: string): string {
  const [, name = '', value = ''] = /^--([a-z-]+)[ =](.+)$/.exec(option) ?? []
  switch (name) {
    case 'accept': return 'Take it'
    case 'leave': return 'Leave as drawn'
    case 'unit': return `It is in ${value}`
    case 'scale': return value === '1:1' ? 'As it is, 1:1' : `At ${value}`
    case 'window': return `Within ${value.split(',').slice(0, 2).join(', ')} and ${value.split(',').slice(2).join(', ')}`
    case 'between': return value.split(',')[0] === value.split(',')[1] ? `At the height ${value.split(',')[0]}` : `Between ${value.replace(',', ' and ')}`
    case 'layer': return `Layer ${value}`
    case 'colour': return `Colour ${value}`
    case 'line-type': return `Line type ${value}`
    default: return option
  }
}

export function Questions({ questions }: { readonly questions: readonly Question[] }) {
  const desk = useDesk()
  return questions.map((question) => (
    <div key={`${question.code} ${question.message}`} className="entry question" role="group" aria-label="Question of the reader">
      <p><b>{withoutOptions(question.message).replace(/([^.?!])$/, '$1.')}</b></p>
      <p>{question.options.map((option) => <button key={option} className="word" onClick={() => desk.answerQuestion(option)}>{optionWords(option)}</button>)}</p>
    </div>
  ))
}

export interface Numbered {
  readonly repair: Repair
  /** Its place in the list of repairs: the number of its balloon less one. */
  readonly index: number
}

/** Repairs that are offered, were taken, or whose code was left. */
export function offered(repairs: readonly Repair[]): Numbered[] {
  return repairs.map((repair, index) => ({ repair, index })).filter(({ repair }) => repair.state !== 'applied')
}

export function ProposalList({ proposals, asked }: { readonly proposals: readonly Numbered[]; readonly asked: readonly string[] }) {
  const desk = useDesk()
  const options = useDeskState((state) => state.opening?.options ?? null)
  const chosen = useDeskState((state) => state.opening?.chosenRepair ?? -1)
  if (options === null) return null
  // What was left and is not offered again can still be taken.
  const gone = options.leave.filter((code) => (proposalCodes as readonly string[]).includes(code) && !proposals.some(({ repair }) => repair.code === code))
  if (proposals.length === 0 && gone.length === 0) return null
  const set = (code: string, take: boolean | null): void => desk.reopen(taking(options, code, take))
  return (
    <>
      <h3>Proposals <span className="note">nothing is done before you take it</span></h3>
      <ul className="repairs proposals">
        {proposals.map(({ repair, index }) => {
          const { code, state, message } = repair
          const left = options.leave.includes(code)
          return (
            <li key={index} className={chosen === index ? 'chosen' : ''}>
              <button aria-pressed={chosen === index} onClick={() => desk.chooseRepair(index)}><b className="balloon">{index + 1}</b><span>{withoutOptions(message)}</span></button>
              <p className="answers">
                {state === 'accepted' ? <><b>Taken.</b> <button className="word" onClick={() => set(code, null)}>Take it back</button></>
                  : left ? <>Left as drawn. <button className="word" onClick={() => set(code, true)}>Take it after all</button></>
                    : asked.includes(code) ? <span className="note">asked above</span>
                      : <><button className="word" onClick={() => set(code, true)}>Take</button> <button className="word" onClick={() => set(code, false)}>Leave</button></>}
              </p>
            </li>
          )
        })}
        {gone.map((code) => (
          <li key={code}><p className="answers"><span className="note">{code.replace('-', ' ')}: left as drawn.</span> <button className="word" onClick={() => set(code, null)}>Ask again</button></p></li>
        ))}
      </ul>
    </>
  )
}
