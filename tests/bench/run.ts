// npm run bench: each domain's measurements, one after the other. Figures are for comparison within one run.
import { run as brewing } from './brewing.ts'
import { run as loans } from './loans.ts'

console.table(brewing())
await loans()
