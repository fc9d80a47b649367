/**
 * All that is judgement and not science: defaults, thresholds and the words of verdicts, each with its reason.
 * Change a figure here and nowhere else. "From memory" marks figures that still want a second source.
 */

// Reading and strength

/** Half-width of an 80 % band in standard deviations. */
export const Z80 = 1.2816
/** One reading of a shared glass hydrometer, 1 standard deviation: meniscus, marks and paper scale together. */
export const READING_ERROR_SG = 0.001
/** Glycerol, acids and yield differ between ferments; plausible figures move every method by 0.15–0.2 %vol. */
export const ABV_STRUCTURE_PERCENT = 0.2
/** A final gravity may read this far under the floor before it is called an error: two readings and an offset. */
export const BELOW_FLOOR_SG = 0.005

// Must

/** Juice and honey solids are not all sucrose: the gravity of the same mass differs by up to this. */
export const SOLIDS_AS_SUCROSE_SG = 0.0007
/** Share by which the solids of one jar of honey, fruit or syrup differ from the table: honey runs 17–20 % water. */
export const SOLIDS_SPREAD = 0.04
/** The same for dry sugars, which are what they say. */
export const PLAIN_SUGAR_SPREAD = 0.003
export const MUST_NOTES = {
  balance: 'Worked by mass: all that dissolves, in the whole volume, taken as sucrose.',
  varies: 'Fruit, juice and honey differ from jar to jar. Measure the must once it is mixed.',
  notAllSugar: 'Some of the dissolved solids are not sugar, so it is weaker than its gravity suggests.',
} as const

// Yeast in store

/** Middle of each place, °C: a household freezer, a fridge, a room. */
export const STORAGE_C = { freezer: -18, fridge: 4, shelf: 20 } as const
/** Dry yeast, sealed, loss rate at 20 °C per year, and how it follows temperature. Chosen to sit between weak sources. */
export const DRY_LOSS_PER_YEAR_20C = 0.22
export const DRY_ACTIVATION_J_PER_MOL = 60_000
/** Opened sachets lose 5–20 times as fast; the geometric middle. From memory, weak. */
export const OPENED_FACTOR = 10
export const OPENED_FACTOR_SPREAD = 0.55
/** Lots differ: standard deviation of the log of the loss rate. Ten lots in 1986 ran from 33 to 100 % after 6 months. */
export const LOT_SPREAD = 1
/** Fresh counts fall short of the label now and then: low end of the band is cut by this share. */
export const FRESH_SHORTFALL = 0.1
/** Liquid yeast, loss per month at 4 °C: 20–25 %. From memory. */
export const LIQUID_LOSS_PER_MONTH_4C = 0.225
/** Slurry from a ferment dies faster than a pack: spent, in alcohol. From memory. */
export const SLURRY_FACTOR = 1.5
/** Freezing without a protectant breaks most cells: what is left of liquid yeast or slurry. From memory. */
export const FROZEN_WET_SURVIVAL = 0.05
/** Months between making and best-before, where only the latter is known: the common shelf life of each form. */
export const SHELF_LIFE_MONTHS = { dry: 24, liquid: 6, slurry: 1 } as const
/** Past this the dry matrix softens and the model no longer holds. */
export const DRY_MODEL_TOP_C = 30

// Belief in a lot

/** Most lots are sound, some have been left warm, a few are dead. */
export const LOT_PARTS = { healthy: 0.88, degraded: 0.09, dead: 0.03 } as const
export const LOT_HEALTHY_BETA = { alpha: 6, beta: 2 } as const
export const LOT_DEGRADED_RANGE = { low: 1e-4, high: 0.3 } as const
/** "Never started" happens to live yeast too: hot or sulphited must, low pH. */
export const NOT_THE_YEAST = 0.02
/** Scatter of the log of the time to first activity around the model. */
export const LAG_SPREAD = 0.35
/** How long people watch before they give up, unless they say, and from when "slow" is slow. */
export const WATCHED_HOURS = 72
export const SLOW_AFTER_HOURS = 24
/** Each month since the outcomes were seen, this share of the belief goes back to the prior. */
export const FORGETTING_PER_MONTH = 0.04

// Lag: t0 + ln(N* / (N0 v eta)) / mu. Middles of ranges from memory (t0 2–6 h, mu 0.15–0.25 /h, eta 0.4–1).

export const LAG_BASE_HOURS = 4
export const GROWTH_PER_HOUR = 0.2
export const ACTIVE_CELLS_PER_ML = 1e7
export const REHYDRATION_YIELD = 0.8
export const USUAL_CELLS_PER_ML = 5e6

// Pitching

/** Living cells in a gram: the guaranteed minimum of dry yeast; liquid packs and thick slurry by common practice. */
export const CELLS_PER_GRAM = { dry: 1e10, liquid: 1e9, slurry: 1e9 } as const
/**
 * Viable cells wanted per mL. Wine practice is 2–6 million a mL whatever the gravity; the brewery rule of 0.75–1.5
 * million a mL for each °P came from repitched slurry. Dry yeast carries reserves, so beer is allowed half of it.
 */
export const WINE_CELLS_PER_ML = { low: 2e6, likely: 5e6, high: 1e7 } as const
export const BEER_CELLS_PER_ML_PLATO = {
  ale: { low: 0.35e6, likely: 0.75e6, high: 1.5e6 },
  lager: { low: 0.75e6, likely: 1.25e6, high: 2e6 },
} as const
/** Above this gravity the dose of wine yeast rises, to double at 1.130 (AWRI: up to double for high sugar). */
export const HIGH_SUGAR_OG = 1.1
export const DOUBLE_DOSE_OG = 1.13
/**
 * Below these, the words change. Four fifths alive is an ordinary pitch; half still starts, with more of it; a fifth is a
 * question to be asked first, and less than that is not worth a must. Chosen so that a word changes before a dose doubles.
 */
export const VIABILITY_GOOD = 0.8
export const VIABILITY_MORE = 0.5
export const VIABILITY_PROVE = 0.2
/** Doses are reckoned for at least this share alive: under it no weight of packets helps. */
export const LEAST_DOSED_SHARE = 0.05
export const PITCH_VERDICTS = ['good', 'pitch-more', 'prove-first', 'do-not-rely'] as const

/** Rehydration by common practice: ten times its weight of tap water, 35–40 °C, 15–30 minutes, then within 10 °C of the must. */
export const REHYDRATION = {
  waterPerGram: 10,
  lowC: 35,
  highC: 40,
  lowMinutes: 15,
  highMinutes: 30,
  largestStepC: 10,
} as const

// Nitrogen

/** mg N per gram of sugar. From memory. */
export const NITROGEN_NEED = { low: 0.75, medium: 0.9, high: 1.25 } as const
/** EU ceiling for all ammonium salts; the US one is 0.96. Regulation 606/2009 Annex I A, carried into 2019/934. */
export const AMMONIUM_CEILING_GRAMS_PER_LITRE = 1
/** In how many feeds: one is enough for a little, more spares the yeast a glut. */
export const FEED_GRAMS_PER_LITRE = 0.3
export const MOST_FEEDS = 3
/** Feeds end at a third of the sugar gone; after half, yeast hardly takes ammonium and it stays in the drink. */
export const LAST_FEED_SHARE = 1 / 3

// Bottles

/** Highest believable volumes of CO2 for each bottle, evaluated at 30 °C. Glass that was scratched or reused has no known margin. */
export const BOTTLE_LIMIT_VOLUMES = {
  beer: 2.5,
  pet: 3,
  sparkling: 4.5,
  'still-wine': 0,
  'swing-top': 0,
} as const
/** Beside the volumes, a stop on pressure at 30 °C, bar: well under the proof test of each bottle. */
export const BOTTLE_LIMIT_BAR_30C = {
  beer: 3.2,
  pet: 4.2,
  sparkling: 6.5,
  'still-wine': 1,
  'swing-top': 1,
} as const
/** What counts as no extra CO2 at all: under the error of the sum. */
export const STILL_TOLERANCE_VOLUMES = 0.05
export const WARM_STORE_C = 30
export const HEADSPACE_FRACTION = 0.04
/** Stable means: no more than 1 point in at least 7 days. Three daily readings cannot tell 0.45 points a day from rest. */
export const STABLE_DAYS = 7
export const STABLE_CHANGE_SG = 0.001
/** "Within a few points" of the gravity expected. */
export const NEAR_EXPECTED_SG = 0.003
/** A reading older than this says little about today. */
export const FRESH_READING_DAYS = 14
/** Colder than its ferment by this much, a batch rests without being finished. */
export const COLD_REST_C = 4
export const COLD_BEER_C = 12
/** Lowest final gravity met in dry mead and cider, where the original is not known. */
export const DRY_FLOOR_SG = 0.99
/** Share of the CO2 that priming really gives: growth takes a little, and sugars differ. */
export const PRIMING_SPREAD = 0.06
/** One extra tablet is not added when it would pass the target by more than this. */
export const TABLET_OVERSHOOT_VOLUMES = 0.4

// Course of a ferment

/** Fewer bubbles than this and it is time to rack and clear, never to bottle. Common practice. */
export const QUIET_BUBBLES_PER_MINUTE = 1
export const BUBBLE_ML = 0.5

// Sulphite and chlorine

/** EU and UK: more than this must be declared on the label, mg/L total SO2. */
export const SULPHITE_LABEL_MG_PER_LITRE = 10
/** Highest total SO2 in cider, mead and fruit wine, EU and UK, mg/L. From memory. */
export const SULPHITE_CEILING_MG_PER_LITRE = 200
/** What keeps a drink: molecular SO2 aimed at, mg/L. Wine practice. */
export const MOLECULAR_AIM_MG_PER_LITRE = 0.8

// Volumes

export const OUTDOOR_CO2_PPM = 420
export const CO2_LIMIT_8H_PPM = 5000
export const CO2_LIMIT_15MIN_PPM = 15_000
/** A batch at its peak: 68 points in all, 30 % of them in a day. */
export const PEAK_BATCH = { volumeLitres: 5, dropPoints: 68, sharePerDay: 0.3 } as const

// Forecast

/** Error of one reading as the fit sees it: the instrument, and a little for the model being a model. */
export const FIT_ERROR_SG = 0.0011
/** How far the true start and end may lie from those given. */
export const OG_PRIOR_SG = 0.003
export const FG_PRIOR_SG = 0.003
/** Log of the rate per day: cider 0.4–0.9, fed mead 0.3–0.7, unfed mead 0.05–0.2, beer 1–2. From memory, weak. */
export const RATE_PRIOR = { mean: Math.log(0.35), sd: 0.9 } as const
/** Finished, for a date: this much or less still to fall. */
export const DONE_SG = 0.001
/** Fewest readings, and fewest days between the first and last, from which anything is said. */
export const FEWEST_READINGS = 3
export const SHORTEST_SPAN_DAYS = 1
/** The band of the date is stretched about its middle by this on each side: real tails run longer than either shape. */
export const FINISH_STRETCH = { early: 0.8, late: 1 } as const
/** Days are whole: an end of the band takes in a day only if it covers more than this share of it. */
export const DAY_SHARE = 0.35
/** A finish band wider than this helps nobody plan. */
export const WIDEST_BAND_DAYS = 42
/** Stuck: flat, this far above what was expected, and this much likelier than a ferment still under way. */
export const STUCK_ABOVE_SG = 0.004
export const STUCK_ODDS = 150
export const STUCK_SPAN_DAYS = { least: 2.5, most: 9 } as const
/** Lag until this share of the expected fall is gone; slowing from this share. */
export const LAG_SHARE = 0.04
export const SLOWING_SHARE = 0.8
/** A reading this many errors off the curve counts less, in proportion. */
export const OUTLIER_ERRORS = 3

// Cleaning and glass

/** Thick glass bears less than the 40 °C at which ordinary soda-lime is at risk. */
export const GLASS_WARNING_C = 30
export const GLASS_RISK_C = 40
/** Conditions that food codes publish; the label of the product goes before them. */
export const SANITISERS = {
  iodophor: {
    stockPercent: 1.75,
    lowMgPerLitre: 12.5,
    highMgPerLitre: 25,
    contactSeconds: 60,
    lowestC: 20,
    source: 'Utah R392-102-10 (after the FDA Food Code), California H&S 114099.6, NY 14-4.112',
  },
  hypochlorite: {
    stockPercent: 5,
    lowMgPerLitre: 50,
    highMgPerLitre: 200,
    contactSeconds: 60,
    lowestC: 24,
    source: 'NY 14-4.112, Utah R392-102-10; unrinsed ceiling 200 mg/L from memory',
  },
  percarbonate: {
    stockPercent: undefined,
    lowMgPerLitre: 10_000,
    highMgPerLitre: 20_000,
    contactSeconds: 900,
    lowestC: 40,
    source: 'common practice, from memory: a cleaner, not a food-contact sanitiser',
  },
  'hot-water': {
    stockPercent: undefined,
    lowMgPerLitre: undefined,
    highMgPerLitre: undefined,
    contactSeconds: 30,
    lowestC: 77,
    source: 'Utah R392-102-10, California H&S 114099.6 (171 °F)',
  },
} as const
