import { batchEndpoints } from '#shared/batches/contract'
import type { Deps } from '../deps.ts'
import { serve } from '../http/serve.ts'
import { changeBatch, copyBatch, listBatches, readBatch, startBatch } from '../services/batches/book.ts'
import { addBottling, addTasting, bottlingAdvice } from '../services/batches/bottling.ts'
import { findEarliestStart } from '../services/batches/earliest.ts'
import { forecastBatch } from '../services/batches/forecast.ts'
import { labelSheet } from '../services/batches/label.ts'
import { movePlan } from '../services/batches/plan-move.ts'
import { dropPlan, requestPlan } from '../services/batches/plan-request.ts'
import { previewPlan } from '../services/batches/plan.ts'
import { addReading, changeReading, deleteReading, listHydrometers, readingTrace } from '../services/batches/readings.ts'
import { roomLoad } from '../services/batches/room.ts'
import { addStep, saveSteps, tickStep, untickStep } from '../services/batches/steps.ts'

export const batchRoutes = (deps: Deps) =>
  serve(deps, batchEndpoints, {
    list: ({ query }, { user }) => listBatches(deps, user.id, query),
    create: ({ body }, { user }) => startBatch(deps, user.id, body),
    get: ({ params }, { user }) => readBatch(deps, user.id, params.id),
    change: ({ params, body }, { user, version }) => changeBatch(deps, user, params.id, version, body),
    copy: ({ params, body }, { user }) => copyBatch(deps, user.id, params.id, body),
    saveSteps: ({ params, body }, { user, version }) => saveSteps(deps, user.id, params.id, version, body),
    addStep: ({ params, body }, { user }) => addStep(deps, user.id, params.id, body),
    plan: ({ params, body }, { user }) => previewPlan(deps, user, params.id, body.startOn),
    earliestStart: ({ params, query }, { user }) => findEarliestStart(deps, user, params.id, query.after),
    requestPlan: ({ params, body }, { user }) => requestPlan(deps, user, params.id, body.startOn),
    movePlan: ({ params, body }, { user }) => movePlan(deps, user, params.id, body),
    dropPlan: ({ params }, { user }) => dropPlan(deps, user, params.id),
    stepDone: ({ params, body }, { user }) => tickStep(deps, user.id, params.id, params.stepId, body),
    stepUndone: ({ params }, { user }) => untickStep(deps, user.id, params.id, params.stepId),
    hydrometers: (_input, { user }) => listHydrometers(deps, user.id),
    addReading: ({ params, body }, { user }) => addReading(deps, user.id, params.id, body),
    changeReading: ({ params, body }, { user, version }) =>
      changeReading(deps, user.id, params.id, params.readingId, version, body),
    deleteReading: ({ params }, { user }) => deleteReading(deps, user.id, params.id, params.readingId),
    readingTrace: ({ params }, { user }) => readingTrace(deps, user.id, params.id),
    forecast: ({ params }, { user }) => forecastBatch(deps, user.id, params.id),
    bottling: ({ params, query }, { user }) => bottlingAdvice(deps, user.id, params.id, query),
    addBottling: ({ params, body }, { user }) => addBottling(deps, user.id, params.id, body),
    label: ({ params, query }, { user }) => labelSheet(deps, user.id, params.id, query),
    addTasting: ({ params, body }, { user }) => addTasting(deps, user.id, params.id, body),
    roomLoad: () => roomLoad(deps),
  })
