#define _POSIX_C_SOURCE 200809L
#include "base/parallel.h"

#ifdef _OPENMP
#include <omp.h>
#include <signal.h>
#endif

static void run_alone(const struct parallel *run, size_t tasks)
{
    for (size_t task = 0; task < tasks; task++) {
        run->work(run->context, 0, task);
        if (run->tell) {
            run->tell(run->context, task + 1);
        }
    }
}

#ifdef _OPENMP

size_t parallel_threads(size_t wanted, size_t tasks)
{
    if (tasks < 2 || omp_in_parallel()) {
        return 1;
    }
    const size_t most = wanted == 0 ? (size_t)omp_get_max_threads() : wanted;
    return most < tasks ? most : tasks;
}

static void leave_signals_to_caller(void)
{
    sigset_t all;
    sigfillset(&all);
    pthread_sigmask(SIG_BLOCK, &all, NULL);
}

static void run_on_threads(const struct parallel *run, size_t threads, size_t tasks)
{
    size_t done = 0;
#pragma omp parallel num_threads((int)threads)
    {
        const size_t thread = (size_t)omp_get_thread_num();
        if (thread > 0) {
            leave_signals_to_caller();
        }
#pragma omp for schedule(dynamic, 1)
        for (size_t task = 0; task < tasks; task++) {
            size_t so_far;
            run->work(run->context, thread, task);
#pragma omp atomic capture
            so_far = ++done;
            if (thread == 0 && run->tell) {
                run->tell(run->context, so_far);
            }
        }
    }
    omp_pause_resource_all(omp_pause_soft); /* threads that wait for more would use up time waiting */
}

void parallel_run(const struct parallel *run, size_t threads, size_t tasks)
{
    if (threads > 1 && !omp_in_parallel()) {
        run_on_threads(run, threads, tasks);
    } else {
        run_alone(run, tasks);
    }
}

#else

size_t parallel_threads(size_t wanted, size_t tasks)
{
    (void)wanted;
    (void)tasks;
    return 1;
}

void parallel_run(const struct parallel *run, size_t threads, size_t tasks)
{
    (void)threads;
    run_alone(run, tasks);
}

#endif
