/* The crew's threads. */
#include "view/crew.h"

#include <SDL.h>
#include <stdbool.h>
#include <stdlib.h>

enum { HELPER_CAPACITY = 15 };

struct ev_crew {
    SDL_Thread *helpers[HELPER_CAPACITY];
    int helper_count;
    SDL_mutex *mutex;
    SDL_cond *begin, *end;
    unsigned round; /* of tasks; goes up with each */
    int at_work;    /* helpers that have not finished the round */
    bool leaving;
    void (*task)(void *data, int index);
    void *data;
    int count;
    SDL_atomic_t next;
};

static void do_pieces(ev_crew *crew)
{
    for (;;) {
        int index = SDL_AtomicAdd(&crew->next, 1);
        if (index >= crew->count) {
            return;
        }
        crew->task(crew->data, index);
    }
}

static int help(void *data)
{
    ev_crew *crew = data;
    unsigned round = 0;
    SDL_LockMutex(crew->mutex);
    for (;;) {
        while (crew->round == round && !crew->leaving) {
            SDL_CondWait(crew->begin, crew->mutex);
        }
        if (crew->leaving) {
            break;
        }
        round = crew->round;
        SDL_UnlockMutex(crew->mutex);
        do_pieces(crew);
        SDL_LockMutex(crew->mutex);
        if (--crew->at_work == 0) {
            SDL_CondSignal(crew->end);
        }
    }
    SDL_UnlockMutex(crew->mutex);
    return 0;
}

ev_crew *ev_crew_create(int threads)
{
    ev_crew *crew = threads > 1 ? calloc(1, sizeof *crew) : NULL;
    if (!crew) {
        return NULL;
    }
    crew->mutex = SDL_CreateMutex();
    crew->begin = SDL_CreateCond();
    crew->end = SDL_CreateCond();
    bool good = crew->mutex && crew->begin && crew->end;
    while (good && crew->helper_count < threads - 1 && crew->helper_count < HELPER_CAPACITY) {
        SDL_Thread *helper = SDL_CreateThread(help, "crew", crew);
        good = helper != NULL;
        if (good) {
            crew->helpers[crew->helper_count++] = helper;
        }
    }
    if (crew->helper_count == 0) {
        ev_crew_destroy(crew);
        return NULL;
    }
    return crew;
}

void ev_crew_destroy(ev_crew *crew)
{
    if (!crew) {
        return;
    }
    if (crew->helper_count > 0) {
        SDL_LockMutex(crew->mutex);
        crew->leaving = true;
        SDL_CondBroadcast(crew->begin);
        SDL_UnlockMutex(crew->mutex);
    }
    for (int i = 0; i < crew->helper_count; ++i) {
        SDL_WaitThread(crew->helpers[i], NULL);
    }
    SDL_DestroyCond(crew->begin);
    SDL_DestroyCond(crew->end);
    SDL_DestroyMutex(crew->mutex);
    free(crew);
}

void ev_crew_run(ev_crew *crew, int count, void (*task)(void *data, int index), void *data)
{
    if (!crew || count < 2) {
        for (int i = 0; i < count; ++i) {
            task(data, i);
        }
        return;
    }
    SDL_LockMutex(crew->mutex);
    crew->task = task;
    crew->data = data;
    crew->count = count;
    SDL_AtomicSet(&crew->next, 0);
    crew->at_work = crew->helper_count;
    ++crew->round;
    SDL_CondBroadcast(crew->begin);
    SDL_UnlockMutex(crew->mutex);
    do_pieces(crew);
    SDL_LockMutex(crew->mutex);
    while (crew->at_work > 0) {
        SDL_CondWait(crew->end, crew->mutex);
    }
    SDL_UnlockMutex(crew->mutex);
}
