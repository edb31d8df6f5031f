import type { RouteRecordRaw } from 'vue-router'

export const releaseRoutes: RouteRecordRaw[] = [
  { path: '/release', name: 'release', component: () => import('@/views/release/ReleaseView.vue'), meta: { title: 'Release' } },
  {
    path: '/release/:batchId',
    name: 'release-batch',
    component: () => import('@/views/release/BatchReleaseView.vue'),
    props: true,
    meta: { title: 'Release of a batch' },
  },
]
