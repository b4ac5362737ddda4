/* timed: runs a command with its output thrown away; prints its seconds, peak memory in KiB and
 * exit status. timed COMMAND ARGUMENT... */
#define _GNU_SOURCE
#include <fcntl.h>
#include <stdio.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <time.h>
#include <unistd.h>

static double now(void)
{
    struct timespec t;
    clock_gettime(CLOCK_MONOTONIC, &t);
    return (double)t.tv_sec + (double)t.tv_nsec / 1e9;
}

int main(int argc, char **argv)
{
    struct rusage used;
    int status;
    if (argc < 2)
        return 2;
    double began = now();
    pid_t child = fork();
    if (child < 0)
        return 1;
    if (child == 0) {
        int nowhere = open("/dev/null", O_WRONLY);
        if (nowhere >= 0)
            dup2(nowhere, STDOUT_FILENO);
        execvp(argv[1], argv + 1);
        perror(argv[1]);
        _exit(127);
    }
    if (wait4(child, &status, 0, &used) != child)
        return 1;
    double took = now() - began;
    printf("%.4f %ld %d\n", took, used.ru_maxrss, WIFEXITED(status) ? WEXITSTATUS(status) : 128);
    return 0;
}
