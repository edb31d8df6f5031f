import type { RouteRecordRaw } from 'vue-router'

export const watchRoutes: RouteRecordRaw[] = [
  { path: '/watch', name: 'watch', component: () => import('@/views/watch/WatchView.vue'), meta: { title: 'Watch' } },
]
