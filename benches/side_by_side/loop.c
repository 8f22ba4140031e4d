/* A loop at C speed over LAPACK's dsygv and dsygvd, so that no Python is timed.
   Everything is column-major and the workspace is the caller's. */
#include <string.h>
#include <time.h>

typedef void (*sygv)(int *itype, char *jobz, char *uplo, int *n, double *a, int *lda, double *b,
                     int *ldb, double *w, double *work, int *lwork, int *info, long, long);
typedef void (*sygvd)(int *itype, char *jobz, char *uplo, int *n, double *a, int *lda, double *b,
                      int *ldb, double *w, double *work, int *lwork, int *iwork, int *liwork,
                      int *info, long, long);

static double now(void)
{
    struct timespec t;
    clock_gettime(CLOCK_THREAD_CPUTIME_ID, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

/* Solves `count` problems and writes the seconds of each `chunk` of them to `seconds`; the copies
   that LAPACK's destruction of its input makes necessary are inside. 0, or 1 when one fails. */
int many(void *routine, int divide, int n, int count, char job, const double *h, const double *s,
            double *a, double *b, double *w, double *work, int lwork, int *iwork, int liwork,
         int chunk, double *seconds)
{
    double start = now();
    int one = 1, info = 0;
    char lower = 'L';
    size_t size = (size_t)n * n;
    for (int k = 0; k < count; k++) {
        memcpy(a, h + k * size, size * sizeof *a);
        memcpy(b, s + k * size, size * sizeof *b);
        if (divide)
            ((sygvd)routine)(&one, &job, &lower, &n, a, &n, b, &n, w, work, &lwork, iwork, &liwork, &info, 1, 1);
        else
            ((sygv)routine)(&one, &job, &lower, &n, a, &n, b, &n, w, work, &lwork, &info, 1, 1);
        if (info)
            return 1;
        if ((k + 1) % chunk == 0) {
            double end = now();
            *seconds++ = end - start;
            start = now();
        }
    }
    return 0;
}
