import type { RouteRecordRaw } from 'vue-router'

export const changeRoutes: RouteRecordRaw[] = [
  { path: '/change', name: 'change', component: () => import('@/views/change/ChangeView.vue'), meta: { title: 'Change' } },
  {
    path: '/change/new',
    name: 'change-new',
    component: () => import('@/views/change/NewChangeoverView.vue'),
    meta: { title: 'Begin a tooling change' },
  },
  {
    path: '/change/:changeoverId',
    name: 'change-one',
    component: () => import('@/views/change/ChangeoverView.vue'),
    props: true,
    meta: { title: 'Tooling change' },
  },
]
