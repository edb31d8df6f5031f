import type { RouteRecordRaw } from 'vue-router'

export const reviewRoutes: RouteRecordRaw[] = [
  { path: '/review', name: 'review', component: () => import('@/views/review/ReviewView.vue'), meta: { title: 'Review' } },
]
