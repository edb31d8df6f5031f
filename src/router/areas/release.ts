import type { RouteRecordRaw } from 'vue-router'

export const releaseRoutes: RouteRecordRaw[] = [
  { path: '/release', name: 'release', component: () => import('@/views/release/ReleaseView.vue'), meta: { title: 'Release' } },
]
