import type { RouteRecordRaw } from 'vue-router'

export const watchRoutes: RouteRecordRaw[] = [
  { path: '/watch', name: 'watch', component: () => import('@/views/watch/WatchView.vue'), meta: { title: 'Watch' } },
  {
    path: '/watch/:batchId',
    name: 'watch-batch',
    component: () => import('@/views/watch/BatchWatchView.vue'),
    props: true,
    meta: { title: 'Watch a batch' },
  },
]
