import type { RouteRecordRaw } from 'vue-router'

interface Master {
  path: string
  title: string
  list: () => Promise<unknown>
  one: () => Promise<unknown>
}

const MASTERS: readonly Master[] = [
  {
    ...{ path: 'machines', title: 'Machines' },
    list: () => import('@/views/set-up/MachineListView.vue'),
    one: () => import('@/views/set-up/MachineView.vue'),
  },
  {
    ...{ path: 'tooling-sets', title: 'Tooling sets' },
    list: () => import('@/views/set-up/ToolingSetListView.vue'),
    one: () => import('@/views/set-up/ToolingSetView.vue'),
  },
  {
    ...{ path: 'products', title: 'Products' },
    list: () => import('@/views/set-up/ProductListView.vue'),
    one: () => import('@/views/set-up/ProductView.vue'),
  },
  {
    ...{ path: 'control-plans', title: 'Control plans' },
    list: () => import('@/views/set-up/ControlPlanListView.vue'),
    one: () => import('@/views/set-up/ControlPlanView.vue'),
  },
  {
    ...{ path: 'shell-lots', title: 'Shell lots' },
    list: () => import('@/views/set-up/ShellLotListView.vue'),
    one: () => import('@/views/set-up/ShellLotView.vue'),
  },
  {
    ...{ path: 'balances', title: 'Balances' },
    list: () => import('@/views/set-up/BalanceListView.vue'),
    one: () => import('@/views/set-up/BalanceView.vue'),
  },
  {
    ...{ path: 'people', title: 'People' },
    list: () => import('@/views/set-up/PeopleListView.vue'),
    one: () => import('@/views/set-up/PersonView.vue'),
  },
  {
    ...{ path: 'sites', title: 'Sites' },
    list: () => import('@/views/set-up/SiteListView.vue'),
    one: () => import('@/views/set-up/SiteView.vue'),
  },
]

/** Each master has its list, a page for a new one and a page for each. */
const masterRoutes = MASTERS.flatMap(({ path, title, list, one }): RouteRecordRaw[] => [
  { path, component: list, meta: { title } },
  { path: `${path}/new`, component: one, meta: { title } },
  { path: `${path}/:id`, component: one, meta: { title } },
])

/** Nested, so that the word in the navigation stays marked on every page of the area. */
export const setUpRoutes: RouteRecordRaw[] = [
  {
    path: '/set-up',
    children: [
      { path: '', name: 'set-up', component: () => import('@/views/set-up/SetUpView.vue'), meta: { title: 'Set up' } },
      ...masterRoutes,
    ],
  },
]
