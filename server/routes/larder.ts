import { larderEndpoints } from '#shared/larder/contract'
import { tabEndpoints } from '#shared/larder/tab-contract'
import type { Deps } from '../deps.ts'
import { serve } from '../http/serve.ts'
import { drawIngredient, moveLot, undoMove } from '../services/larder/draws.ts'
import { exportLots, exportShoppingList } from '../services/larder/export-lots.ts'
import { importLots } from '../services/larder/import-lots.ts'
import {
  addIngredient,
  changeIngredient,
  listIngredients,
  readIngredient,
} from '../services/larder/ingredients.ts'
import { addLot, changeLot, listLots, readLot } from '../services/larder/lots.ts'
import { listMoves } from '../services/larder/move-replies.ts'
import { readShoppingList } from '../services/larder/shopping.ts'
import { commitStocktake, listStocktakes, readStocktake } from '../services/larder/stocktakes.ts'
import { listTabs, readTab, settleTab } from '../services/larder/tabs.ts'

export const larderRoutes = (deps: Deps) =>
  serve(deps, larderEndpoints, {
    ingredients: ({ query }) => listIngredients(deps, query),
    ingredient: ({ params }) => readIngredient(deps, params.id),
    addIngredient: ({ body }) => addIngredient(deps, body),
    changeIngredient: ({ params, body }, { version }) => changeIngredient(deps, params.id, version, body),
    drawIngredient: ({ params, body }, { user }) => drawIngredient(deps, user, params.id, body),
    lots: ({ query }) => listLots(deps, query),
    lot: ({ params }) => readLot(deps, params.id),
    addLot: ({ body }, { user }) => addLot(deps, user.id, body),
    changeLot: ({ params, body }, { user, version }) => changeLot(deps, user, params.id, version, body),
    importLots: ({ query }, { user, upload }) => importLots(deps, user.id, upload.bytes, query.dryRun),
    exportLots: () => exportLots(deps),
    moves: ({ params, query }, { user }) => listMoves(deps, user, params.id, query),
    addMove: ({ params, body }, { user }) => moveLot(deps, user, params.id, body),
    undoMove: ({ params }, { user }) => undoMove(deps, user, params.id),
    shoppingList: () => readShoppingList(deps),
    shoppingListCsv: () => exportShoppingList(deps),
    stocktakes: ({ query }) => listStocktakes(deps, query),
    stocktake: ({ params }) => readStocktake(deps, params.id),
    commitStocktake: ({ body }, { user }) => commitStocktake(deps, user.id, body),
  })

export const tabRoutes = (deps: Deps) =>
  serve(deps, tabEndpoints, {
    mine: ({ query }, { user }) => readTab(deps, user, user.id, query),
    ofMember: ({ params, query }, { user }) => readTab(deps, user, params.id, query),
    all: () => listTabs(deps),
    settle: ({ params, body }, { user }) => settleTab(deps, user.id, params.id, body),
  })
