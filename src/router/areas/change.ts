import type { RouteRecordRaw } from 'vue-router'

export const changeRoutes: RouteRecordRaw[] = [
  { path: '/change', name: 'change', component: () => import('@/views/change/ChangeView.vue'), meta: { title: 'Change' } },
]
