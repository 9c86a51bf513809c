/* A few threads that share out the pieces of one task: bands of an image, regions of the page. They
 * sleep between tasks. (Threads of OpenMP's run-time go on spinning for a while, and on two cores
 * they take from the GL driver's own threads what they win.) Which thread does which piece must not
 * matter to the outcome. */
#pragma once

typedef struct ev_crew ev_crew;

/* `threads` counts the caller; NULL when no helper can be had, which ev_crew_run takes too. */
ev_crew *ev_crew_create(int threads);
void ev_crew_destroy(ev_crew *crew);

/* Calls task(data, 0) to task(data, count - 1), each once, and returns when all are done. One task
 * at a time, always from the same thread. */
void ev_crew_run(ev_crew *crew, int count, void (*task)(void *data, int index), void *data);
