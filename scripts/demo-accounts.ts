/** Prints who may sign in to try the demo bench: `npx tsx scripts/demo-accounts.ts`. */
import { DEMO_BENCH, DEMO_PASS_PHRASE, DEMO_PEOPLE } from './demo'

const width = Math.max(...DEMO_PEOPLE.map(person => person.mail.length))
console.log([
  `Demo accounts of the invented ${DEMO_BENCH}, pass phrase for each: ${DEMO_PASS_PHRASE}`,
  ...DEMO_PEOPLE.map(({ mail, name, role }) => `  ${mail.padEnd(width)}  ${name}, ${role}`),
].join('\n'))
