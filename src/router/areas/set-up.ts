import type { RouteRecordRaw } from 'vue-router'

export const setUpRoutes: RouteRecordRaw[] = [
  { path: '/set-up', name: 'set-up', component: () => import('@/views/set-up/SetUpView.vue'), meta: { title: 'Set up' } },
]
