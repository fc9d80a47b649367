export const AGENT_KINDS = ['cleaner', 'sanitiser'] as const
export type AgentKind = (typeof AGENT_KINDS)[number]

export interface Agent {
  code: string
  name: string
  kind: AgentKind
  /** Ways it is commonly used, weakest contact first. The product's own label governs; these only prompt a second look. */
  usual: readonly { concentration: string; minMinutes: number; temperature?: string; source: string }[]
  caution: string
  why: string
}

/** What kit is washed and sanitised with in the space. Conditions are published ones, for comparison with the label. */
export const AGENTS = [
  {
    code: 'detergent',
    name: 'Washing-up liquid',
    kind: 'cleaner',
    usual: [],
    caution: 'Rinse until no foam is left.',
    why: 'What stays behind spoils the head of a beer and can taste of perfume.',
  },
  {
    code: 'percarbonate',
    name: 'Sodium percarbonate',
    kind: 'cleaner',
    usual: [
      {
        concentration: '10–20 g/L',
        minMinutes: 10,
        temperature: '40–60 °C',
        source: 'common practice, from memory',
      },
    ],
    caution: 'Wear gloves and goggles, and never close the vessel while it works.',
    why: 'It is caustic, and the oxygen it gives off builds pressure.',
  },
  {
    code: 'iodophor',
    name: 'Iodophor',
    kind: 'sanitiser',
    usual: [
      {
        concentration: '12.5–25 mg/L',
        minMinutes: 0.5,
        temperature: '20 °C or warmer',
        source: 'Utah R392-102-10, after FDA Food Code 4-501.114',
      },
      { concentration: '25 mg/L', minMinutes: 1, source: 'California H&S 114099.6' },
    ],
    caution: 'Rinse off every alkaline cleaner first.',
    why: 'Alkali uses the iodine up, so that nothing is left to sanitise with.',
  },
  {
    code: 'hypochlorite',
    name: 'Chlorine bleach (hypochlorite)',
    kind: 'sanitiser',
    usual: [
      { concentration: '100 mg/L', minMinutes: 0.5, source: 'California H&S 114099.6' },
      {
        concentration: '50 mg/L',
        minMinutes: 1,
        temperature: '24 °C or warmer',
        source: 'New York 14-4.112',
      },
    ],
    caution: 'Rinse it well, and keep every other chemical away from it.',
    why: 'With acid it gives off chlorine, with ammonia chloramines; what stays behind tastes of plasters.',
  },
  {
    code: 'hot-water',
    name: 'Hot water',
    kind: 'sanitiser',
    usual: [
      {
        concentration: 'under the surface',
        minMinutes: 0.5,
        temperature: '77 °C or hotter',
        source: 'Utah R392-102-10; California H&S 114099.6',
      },
    ],
    caution: 'Metal and heat-proof plastic only, never glass, and mind your hands.',
    why: 'Cold glass cracks when it meets very hot water.',
  },
  {
    code: 'peracetic-acid',
    name: 'Peracetic acid',
    kind: 'sanitiser',
    usual: [{ concentration: '100–200 mg/L', minMinutes: 1, source: 'from memory; the label governs' }],
    caution: 'Dilute it by an open window, with goggles and gloves on.',
    why: 'The concentrate burns skin and its vapour hurts the lungs.',
  },
  {
    code: 'acid-anionic',
    name: 'No-rinse acid (acid-anionic)',
    kind: 'sanitiser',
    usual: [
      {
        concentration: 'as the label says, pH under 3',
        minMinutes: 1,
        source: 'from memory; the label governs',
      },
    ],
    caution: 'Keep every inside face wet for the whole time, then let it drain.',
    why: 'It works only while it is wet, and not at all where foam alone reaches.',
  },
] as const satisfies Agent[]

/** The agent a record names: by code or by name, whatever the letter case. */
export function findAgent(text: string): Agent | undefined {
  const wanted = text.trim().toLowerCase()
  return AGENTS.find((agent) => agent.code === wanted || agent.name.toLowerCase() === wanted)
}

/** Pairs that must never meet, with what happens. WHO 2014 (chlorine), the rest general chemistry. */
export const NEVER_MIX = [
  { pair: ['Chlorine bleach', 'any acid'], why: 'gives off chlorine gas' },
  { pair: ['Chlorine bleach', 'ammonia'], why: 'gives off chloramines' },
  { pair: ['Chlorine bleach', 'percarbonate or peroxide'], why: 'both are used up, with heat and gas' },
  { pair: ['Chlorine bleach', 'metabisulphite'], why: 'heats up, and both are used up' },
  {
    pair: ['Metabisulphite', 'acid in a closed space'],
    why: 'gives off sulphur dioxide, which sets off asthma',
  },
  { pair: ['Iodophor', 'alkaline cleaner'], why: 'the iodine is used up' },
] as const
