/** The main navigation: six words, in the order of the work. */
export const AREAS = [
  { word: 'Weigh', path: '/weigh', icon: 'M4 19h16M6 19l2-9h8l2 9M12 10V6M8.5 6h7' },
  { word: 'Watch', path: '/watch', icon: 'M4 5v14h16M7 14l3-4 3 2.5L18 7' },
  { word: 'Change', path: '/change', icon: 'M12 4v3M12 17v3M4 12h3M17 12h3M12 9a3 3 0 1 0 0 6 3 3 0 0 0 0-6Z' },
  { word: 'Release', path: '/release', icon: 'M5 12.5l4.5 4.5L19 7' },
  { word: 'Review', path: '/review', icon: 'M5 5h14v14H5zM5 10h14M10 10v9' },
  { word: 'Set up', path: '/set-up', icon: 'M4 7h9M17 7h3M4 12h3M11 12h9M4 17h11M19 17h1M13 5v4M7 10v4M15 15v4' },
] as const
