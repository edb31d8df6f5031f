import { createRouter, createWebHistory, type Router } from 'vue-router'
import { ApiProblem } from '@/api/api-problem.ts'
import { useSessionStore } from '@/stores/session.ts'
import { changeRoutes } from './areas/change.ts'
import { releaseRoutes } from './areas/release.ts'
import { reviewRoutes } from './areas/review.ts'
import { setUpRoutes } from './areas/set-up.ts'
import { watchRoutes } from './areas/watch.ts'
import { weighRoutes } from './areas/weigh.ts'
import { landingPage } from './landing-page.ts'

declare module 'vue-router' {
  interface RouteMeta {
    title?: string
    /** Shown without a session. */
    isOpen?: boolean
    /** An operator's station: no navigation rail, the whole width for the hands. */
    isStation?: boolean
  }
}

/** The six areas, each with its own file; every page is loaded when it is first opened. */
export function createAppRouter(): Router {
  const router = createRouter({
    history: createWebHistory(),
    routes: [
      { path: '/', name: 'home', redirect: () => landingPage(useSessionStore().roles) },
      { path: '/sign-in', name: 'sign-in', component: () => import('@/views/SignInView.vue'), meta: { title: 'Sign in', isOpen: true } },
      { path: '/account', name: 'account', component: () => import('@/views/account/AccountView.vue'), meta: { title: 'Your account' } },
      ...weighRoutes,
      ...watchRoutes,
      ...changeRoutes,
      ...releaseRoutes,
      ...reviewRoutes,
      ...setUpRoutes,
      { path: '/:path(.*)*', name: 'not-found', component: () => import('@/views/NotFoundView.vue'), meta: { title: 'Not found' } },
    ],
    scrollBehavior: (_to, _from, saved) => saved ?? { top: 0 },
  })

  router.beforeEach(async (to) => {
    const session = useSessionStore()
    try {
      await session.restore()
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error
      if (!to.meta.isOpen) return { name: 'sign-in', query: { to: to.fullPath } }
    }
    if (!session.isSignedIn && !to.meta.isOpen) return { name: 'sign-in', query: to.fullPath === '/' ? {} : { to: to.fullPath } }
    if (session.isSignedIn && to.name === 'sign-in') return { path: landingPage(session.roles) }
    return true
  })

  router.afterEach((to) => {
    document.title = to.meta.title === undefined ? 'Scruple' : `${to.meta.title} · Scruple`
  })

  return router
}
