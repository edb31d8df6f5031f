import type { RouteRecordRaw } from 'vue-router'

export const weighRoutes: RouteRecordRaw[] = [
  { path: '/weigh', name: 'weigh', component: () => import('@/views/weigh/WeighView.vue'), meta: { title: 'Weigh' } },
]
