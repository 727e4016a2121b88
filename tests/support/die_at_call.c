/* Preloaded into the program by tests/app/killed_at_each_call.py: counts the calls that change something below the folder
   LIDWRIGHT_BELOW, and kills the process (SIGKILL) right before call number LIDWRIGHT_LAST_CALL; a write is done by half
   first. Without that number the count goes to the file LIDWRIGHT_COUNT at the end. */
#define _GNU_SOURCE
#include <dlfcn.h>
#include <fcntl.h>
#include <signal.h>
#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <sys/types.h>
#include <unistd.h>

#define REAL(name) ((__typeof__(&name))dlsym(RTLD_NEXT, #name))

static long calls;

static int below(const char* path) {
  const char* folder = getenv("LIDWRIGHT_BELOW");
  return folder && path && strncmp(path, folder, strlen(folder)) == 0;
}

static int open_below(int descriptor) {
  char link[64], path[4096];
  snprintf(link, sizeof link, "/proc/self/fd/%d", descriptor);
  const ssize_t length = readlink(link, path, sizeof path - 1);
  if (length < 0) return 0;
  path[length] = 0;
  return below(path);
}

static int is_last_call(void) {
  const char* last = getenv("LIDWRIGHT_LAST_CALL");
  return ++calls == (last ? atol(last) : -1);
}

static void die(void) { kill(getpid(), SIGKILL); }

static void count(int counts) {
  if (counts && is_last_call()) die();
}

static int open_mode(va_list arguments, int flags) { return flags & O_CREAT ? va_arg(arguments, int) : 0; }

int open(const char* path, int flags, ...) {
  va_list arguments;
  va_start(arguments, flags);
  const int mode = open_mode(arguments, flags);
  va_end(arguments);
  count((flags & (O_CREAT | O_TRUNC)) && below(path));
  return REAL(open)(path, flags, mode);
}

int open64(const char* path, int flags, ...) {
  va_list arguments;
  va_start(arguments, flags);
  const int mode = open_mode(arguments, flags);
  va_end(arguments);
  count((flags & (O_CREAT | O_TRUNC)) && below(path));
  return REAL(open64)(path, flags, mode);
}

ssize_t write(int descriptor, const void* bytes, size_t size) {
  if (open_below(descriptor) && is_last_call()) {
    REAL(write)(descriptor, bytes, size / 2);
    die();
  }
  return REAL(write)(descriptor, bytes, size);
}

int rename(const char* from, const char* to) {
  count(below(to));
  return REAL(rename)(from, to);
}

int unlink(const char* path) {
  count(below(path));
  return REAL(unlink)(path);
}

int mkdir(const char* path, mode_t mode) {
  count(below(path));
  return REAL(mkdir)(path, mode);
}

int ftruncate(int descriptor, off_t size) {
  count(open_below(descriptor));
  return REAL(ftruncate)(descriptor, size);
}

__attribute__((destructor)) static void report(void) {
  const char* path = getenv("LIDWRIGHT_COUNT");
  FILE* file = path && calls > 0 ? fopen(path, "w") : NULL;
  if (!file) return;
  fprintf(file, "%ld\n", calls);
  fclose(file);
}
