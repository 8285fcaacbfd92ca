/*
 * Preloaded into the program: lets the n-th call of one kind fail, counts the calls.
 *   FAULT_KIND   memory | read | write | open | opendir | rename | link | mkdir | unlink | close |
 *                pdf (libharu saves)
 *   FAULT_AT     which call fails, from 1; 0 or none: only count
 *   FAULT_STAY   all later ones fail as well (a disk stays full)
 *   FAULT_COUNT  file that gets the number of calls when the program ends, however it ends
 * Only calls of the program and its libraries after main has begun count.
 */
#define _GNU_SOURCE
#include <dirent.h>
#include <dlfcn.h>
#include <errno.h>
#include <fcntl.h>
#include <stdarg.h>
#include <stdatomic.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <sys/types.h>
#include <unistd.h>

#define CALLER __builtin_return_address(0)

enum kind {
    KIND_NONE,
    KIND_MEMORY,
    KIND_READ,
    KIND_WRITE,
    KIND_OPEN, /* for writing */
    KIND_OPENDIR,
    KIND_RENAME,
    KIND_LINK,
    KIND_MKDIR,
    KIND_UNLINK,
    KIND_CLOSE,
    KIND_FSYNC,
    KIND_PDF,
    KIND_COUNT
};

static enum kind kind;
static unsigned long fail_at;
static int stay;
static atomic_ulong calls;
static int count_file = -1;

extern void *__libc_malloc(size_t);
extern void *__libc_calloc(size_t, size_t);
extern void *__libc_realloc(void *, size_t);
extern void *__libc_memalign(size_t, size_t);

__attribute__((constructor)) static void begin(void)
{
    static const char *const names[] = {"",        "memory", "read", "write", "open",
                                        "opendir", "rename", "link", "mkdir", "unlink",
                                        "close",   "fsync",  "pdf"};
    const char *wanted = getenv("FAULT_KIND"), *at = getenv("FAULT_AT");
    const char *count = getenv("FAULT_COUNT");
    if (count)
        count_file = open(count, O_WRONLY | O_CREAT | O_TRUNC | O_CLOEXEC, 0666);
    for (int i = 1; wanted && i < KIND_COUNT; i++)
        if (strcmp(wanted, names[i]) == 0)
            kind = (enum kind)i;
    fail_at = at ? strtoul(at, NULL, 10) : 0;
    stay = getenv("FAULT_STAY") != NULL;
}

/* HarfBuzz 6.0.0 dies of some: the program makes sure of room before it calls it (see ulimit). */
static int is_skipped(void *caller)
{
    Dl_info about;
    return dladdr(caller, &about) && about.dli_fname && strstr(about.dli_fname, "libharfbuzz");
}

static int fails(enum kind of, void *caller)
{
    if (of != kind || (of == KIND_MEMORY && is_skipped(caller)))
        return 0;
    unsigned long now = atomic_fetch_add(&calls, 1) + 1;
    return fail_at && (now == fail_at || (stay && now > fail_at));
}

__attribute__((destructor)) static void end(void)
{
    char text[32];
    int length = snprintf(text, sizeof text, "%lu\n", (unsigned long)calls);
    if (count_file >= 0 && pwrite(count_file, text, (size_t)length, 0) < 0)
        return;
}

void *malloc(size_t size)
{
    if (fails(KIND_MEMORY, CALLER)) {
        errno = ENOMEM;
        return NULL;
    }
    return __libc_malloc(size);
}

void *calloc(size_t count, size_t size)
{
    if (fails(KIND_MEMORY, CALLER)) {
        errno = ENOMEM;
        return NULL;
    }
    return __libc_calloc(count, size);
}

void *realloc(void *block, size_t size)
{
    if (fails(KIND_MEMORY, CALLER)) {
        errno = ENOMEM;
        return NULL;
    }
    return __libc_realloc(block, size);
}

int posix_memalign(void **block, size_t alignment, size_t size)
{
    if (fails(KIND_MEMORY, CALLER))
        return ENOMEM;
    *block = __libc_memalign(alignment, size);
    return *block ? 0 : ENOMEM;
}

#define REAL(name) ((__typeof__(&name))dlsym(RTLD_NEXT, #name))

ssize_t write(int file, const void *data, size_t size)
{
    static ssize_t (*real)(int, const void *, size_t);
    if (!real)
        real = REAL(write);
    if (file > 2 && fails(KIND_WRITE, CALLER)) {
        errno = ENOSPC;
        /* a disk that is full from now on takes half of it first */
        return stay && calls == fail_at && size > 1 ? real(file, data, size / 2) : -1;
    }
    return real(file, data, size);
}

ssize_t read(int file, void *data, size_t size)
{
    static ssize_t (*real)(int, void *, size_t);
    if (!real)
        real = REAL(read);
    if (file > 2 && fails(KIND_READ, CALLER)) {
        errno = EIO;
        return -1;
    }
    return real(file, data, size);
}

DIR *opendir(const char *path)
{
    if (fails(KIND_OPENDIR, CALLER)) {
        errno = EMFILE;
        return NULL;
    }
    return REAL(opendir)(path);
}

unsigned long HPDF_SaveToStream(void *document)
{
    enum { HPDF_FILE_IO_ERROR = 0x1016 };
    if (fails(KIND_PDF, CALLER))
        return HPDF_FILE_IO_ERROR;
    unsigned long (*real)(void *) =
        (unsigned long (*)(void *))dlsym(RTLD_NEXT, "HPDF_SaveToStream");
    return real(document);
}

int link(const char *from, const char *to)
{
    if (fails(KIND_LINK, CALLER)) {
        errno = EPERM;
        return -1;
    }
    return REAL(link)(from, to);
}

static int opened(int (*real)(const char *, int, ...), const char *path, int flags, mode_t mode)
{
    if ((flags & O_ACCMODE) != O_RDONLY && fails(KIND_OPEN, CALLER)) {
        errno = EMFILE;
        return -1;
    }
    return real(path, flags, mode);
}

int open(const char *path, int flags, ...)
{
    static int (*real)(const char *, int, ...);
    va_list more;
    va_start(more, flags);
    mode_t mode = flags & O_CREAT ? va_arg(more, mode_t) : 0;
    va_end(more);
    if (!real)
        real = REAL(open);
    return opened(real, path, flags, mode);
}

int fsync(int file)
{
    if (fails(KIND_FSYNC, CALLER)) {
        errno = EIO;
        return -1;
    }
    return REAL(fsync)(file);
}

int rename(const char *from, const char *to)
{
    if (fails(KIND_RENAME, CALLER)) {
        errno = EIO;
        return -1;
    }
    return REAL(rename)(from, to);
}

int mkdir(const char *path, mode_t mode)
{
    if (fails(KIND_MKDIR, CALLER)) {
        errno = ENOSPC;
        return -1;
    }
    return REAL(mkdir)(path, mode);
}

int unlink(const char *path)
{
    if (fails(KIND_UNLINK, CALLER)) {
        errno = EIO;
        return -1;
    }
    return REAL(unlink)(path);
}

int close(int file)
{
    static int (*real)(int);
    if (!real)
        real = REAL(close);
    int answer = real(file);
    if (file > 2 && fails(KIND_CLOSE, CALLER)) {
        errno = EIO;
        return -1;
    }
    return answer;
}
