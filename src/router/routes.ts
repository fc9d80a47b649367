import type { RouteRecordInfo, RouteRecordRaw } from 'vue-router'
import type { Access } from '#shared/http/endpoint'

/** Every page by name. A link can only name one of these: `:to="{ name: 'kind', params: { kindId } }"`. */
export const PATHS = {
  'sign-in': '/sign-in',
  join: '/join',
  invitation: '/invitations/:token',
  forgotten: '/forgotten',
  'new-password': '/forgotten/:token',
  'email-change': '/email-changes/:token',
  today: '/',
  desk: '/desk',
  scan: '/scan',
  kit: '/kit',
  'kind-new': '/kit/new',
  kind: '/kit/:kindId',
  'kind-edit': '/kit/:kindId/edit',
  'item-new': '/kit/:kindId/new-item',
  inductions: '/kit/:kindId/inductions',
  items: '/items',
  item: '/items/:tag',
  'item-edit': '/items/:tag/edit',
  loan: '/loans/:loanId',
  loans: '/loans',
  calendar: '/calendar',
  batches: '/batches',
  'batch-new': '/batches/new',
  batch: '/batches/:batchId',
  'batch-recipe': '/batches/:batchId/recipe',
  'batch-plan': '/batches/:batchId/plan',
  'batch-bottling': '/batches/:batchId/bottling',
  'batch-label': '/batches/:batchId/label',
  'batch-tasting': '/batches/:batchId/tasting',
  'batch-story': '/batches/:batchId/story',
  yeast: '/yeast',
  'packet-new': '/yeast/new',
  packet: '/yeast/:packetId',
  'packet-change': '/yeast/:packetId/change',
  'pitch-outcome': '/pitches/:pitchId/outcome',
  larder: '/larder',
  'lot-new': '/larder/new-lot',
  'ingredient-new': '/larder/new',
  'larder-tab': '/larder/tab',
  'larder-tabs': '/larder/tabs',
  'member-tab': '/larder/tabs/:memberId',
  'larder-import': '/larder/import',
  'shopping-list': '/larder/shopping-list',
  ingredient: '/larder/:ingredientId',
  'ingredient-edit': '/larder/:ingredientId/change',
  bench: '/bench',
  stocktake: '/stocktake',
  reports: '/reports',
  members: '/members',
  space: '/space',
  me: '/me',
  more: '/more',
  gallery: '/gallery',
  'not-found': '/:anything(.*)*',
} as const

export type PageName = keyof typeof PATHS

declare module 'vue-router' {
  interface RouteMeta {
    /** First part of the document title, and what a page is called before it has loaded its own name. */
    title: string
    /** Who may come in; `member` unless said. The server decides again for each request. */
    access?: Access
    /** Drawn without header and bottom bar. */
    bare?: true
    /** Which place of the navigation is lit, where it is not the page itself. */
    place?: PageName
  }
  interface TypesConfig {
    RouteNamedMap: {
      [N in PageName]: RouteRecordInfo<
        N,
        (typeof PATHS)[N],
        Params<(typeof PATHS)[N]>,
        Params<(typeof PATHS)[N]>
      >
    }
  }
}

type Params<P extends string> = P extends `${string}:anything${string}`
  ? { anything?: string[] }
  : { [K in ParamNames<P>]: string }
type ParamNames<P extends string> = P extends `${string}:${infer N}/${infer R}`
  ? N | ParamNames<`/${R}`>
  : P extends `${string}:${infer N}`
    ? N
    : never

type Meta = RouteRecordRaw['meta'] & { title: string }
type View = () => Promise<object>

const page = (name: PageName, component: View, meta: Meta): RouteRecordRaw => ({
  name,
  path: PATHS[name],
  component,
  meta,
  props: true,
})

/** One page with parts: each part has an address of its own. */
const batchView = () => import('@/views/batches/BatchView.vue')

/** One line a page. Views are loaded when they are first opened. */
export const routes: RouteRecordRaw[] = [
  page('sign-in', () => import('@/views/session/SignInView.vue'), {
    title: 'Sign in',
    access: 'anyone',
    bare: true,
  }),
  page('join', () => import('@/views/people/JoinView.vue'), {
    title: 'Ask to join',
    access: 'anyone',
    bare: true,
  }),
  page('invitation', () => import('@/views/people/InvitationView.vue'), {
    title: 'Come in',
    access: 'anyone',
    bare: true,
  }),
  page('forgotten', () => import('@/views/people/ForgottenView.vue'), {
    title: 'Forgotten password',
    access: 'anyone',
    bare: true,
  }),
  page('new-password', () => import('@/views/people/NewPasswordView.vue'), {
    title: 'New password',
    access: 'anyone',
    bare: true,
  }),
  page('email-change', () => import('@/views/people/EmailChangeView.vue'), {
    title: 'Confirm your address',
    access: 'anyone',
    bare: true,
  }),
  page('today', () => import('@/views/loans/TodayView.vue'), { title: 'Today' }),
  page('desk', () => import('@/views/loans/DeskView.vue'), { title: 'Desk', access: 'steward' }),
  page('scan', () => import('@/views/loans/ScanView.vue'), { title: 'Find by tag' }),
  page('kit', () => import('@/views/kit/KitListView.vue'), { title: 'Kit' }),
  page('kind', () => import('@/views/kit/KitKindView.vue'), { title: 'Kind', place: 'kit' }),
  page('kind-new', () => import('@/views/kit/KitKindEditView.vue'), {
    title: 'New kind',
    access: 'steward',
    place: 'kit',
  }),
  page('kind-edit', () => import('@/views/kit/KitKindEditView.vue'), {
    title: 'Change a kind',
    access: 'steward',
    place: 'kit',
  }),
  page('inductions', () => import('@/views/kit/KitInductionsView.vue'), {
    title: 'Inductions',
    access: 'steward',
    place: 'kit',
  }),
  page('items', () => import('@/views/kit/KitItemsView.vue'), { title: 'Items', place: 'kit' }),
  page('item', () => import('@/views/kit/KitItemView.vue'), { title: 'Item', place: 'kit' }),
  page('item-new', () => import('@/views/kit/KitItemEditView.vue'), {
    title: 'New item',
    access: 'steward',
    place: 'kit',
  }),
  page('item-edit', () => import('@/views/kit/KitItemEditView.vue'), {
    title: 'Change an item',
    access: 'steward',
    place: 'kit',
  }),
  page('loans', () => import('@/views/loans/LoanListView.vue'), { title: 'Loans' }),
  page('loan', () => import('@/views/loans/LoanView.vue'), { title: 'Loan', place: 'loans' }),
  page('calendar', () => import('@/views/loans/CalendarView.vue'), { title: 'Calendar' }),
  page('me', () => import('@/views/people/MeView.vue'), { title: 'Me' }),
  page('members', () => import('@/views/people/MembersView.vue'), { title: 'Members', access: 'steward' }),
  page('space', () => import('@/views/space/SpaceView.vue'), { title: 'Space', access: 'admin' }),
  page('yeast', () => import('@/views/yeast/YeastFridgeView.vue'), { title: 'Yeast' }),
  page('packet-new', () => import('@/views/yeast/YeastPacketFormView.vue'), {
    title: 'Put a packet in',
    place: 'yeast',
  }),
  page('packet', () => import('@/views/yeast/YeastPacketView.vue'), { title: 'A packet', place: 'yeast' }),
  page('packet-change', () => import('@/views/yeast/YeastPacketFormView.vue'), {
    title: 'Change a packet',
    place: 'yeast',
  }),
  page('pitch-outcome', () => import('@/views/yeast/YeastOutcomeView.vue'), {
    title: 'How did it start?',
    place: 'yeast',
  }),
  page('more', () => import('@/views/session/MoreView.vue'), { title: 'More' }),
  page('bench', () => import('@/views/brewing/BenchView.vue'), { title: 'Bench' }),
  page('larder', () => import('@/views/larder/LarderView.vue'), { title: 'Larder' }),
  page('ingredient', () => import('@/views/larder/IngredientView.vue'), {
    title: 'Ingredient',
    place: 'larder',
  }),
  page('lot-new', () => import('@/views/larder/LotNewView.vue'), {
    title: 'Put something on the shelf',
    place: 'larder',
  }),
  page('ingredient-new', () => import('@/views/larder/IngredientFormView.vue'), {
    title: 'Add to the larder',
    access: 'steward',
    place: 'larder',
  }),
  page('ingredient-edit', () => import('@/views/larder/IngredientFormView.vue'), {
    title: 'Change an ingredient',
    access: 'steward',
    place: 'larder',
  }),
  page('larder-tab', () => import('@/views/larder/LarderTabView.vue'), { title: 'My tab', place: 'larder' }),
  page('larder-tabs', () => import('@/views/larder/LarderTabsView.vue'), {
    title: 'Members’ tabs',
    access: 'steward',
    place: 'larder',
  }),
  page('member-tab', () => import('@/views/larder/LarderTabView.vue'), {
    title: 'Statement',
    access: 'steward',
    place: 'larder',
  }),
  page('larder-import', () => import('@/views/larder/LarderImportView.vue'), {
    title: 'Lots from a sheet',
    access: 'steward',
    place: 'larder',
  }),
  page('shopping-list', () => import('@/views/larder/ShoppingListView.vue'), {
    title: 'Shopping list',
    place: 'larder',
  }),
  page('stocktake', () => import('@/views/larder/StocktakeView.vue'), {
    title: 'Stocktake',
    access: 'steward',
    place: 'larder',
  }),
  page('batches', () => import('@/views/batches/BatchListView.vue'), { title: 'Batches' }),
  page('batch-new', () => import('@/views/batches/BatchFormView.vue'), {
    title: 'A new batch',
    place: 'batches',
  }),
  page('batch', batchView, { title: 'Batch', place: 'batches' }),
  page('batch-recipe', batchView, { title: 'Recipe', place: 'batches' }),
  page('batch-plan', batchView, { title: 'Plan', place: 'batches' }),
  page('batch-bottling', batchView, { title: 'Bottling', place: 'batches' }),
  page('batch-label', batchView, { title: 'Label', place: 'batches' }),
  page('batch-tasting', batchView, { title: 'Tasting', place: 'batches' }),
  page('batch-story', () => import('@/views/batches/BatchStoryView.vue'), {
    title: 'Its story',
    place: 'batches',
  }),
  page('not-found', () => import('@/views/session/NotFoundView.vue'), {
    title: 'Not here',
    access: 'anyone',
  }),
]

if (import.meta.env.DEV) {
  routes.push(
    page('gallery', () => import('@/views/gallery/GalleryView.vue'), { title: 'Gallery', access: 'anyone' }),
  )
}
