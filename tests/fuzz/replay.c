/* Runs a fuzzer on files and folders of files, or, with AFL++, on what it hands over. */
#define _XOPEN_SOURCE 700
#include <ftw.h>
#include <unistd.h>

#include "fuzz.h"

enum { MOST_BYTES = 1 << 20 };
static long n_inputs;

static int one_file(const char *path, const struct stat *about, int kind, struct FTW *place)
{
    static unsigned char bytes[MOST_BYTES];
    (void)about, (void)place;
    if (kind != FTW_F) return 0;
    FILE *file = fopen(path, "rb");
    MUST(file != NULL);
    const size_t size = fread(bytes, 1, sizeof bytes, file);
    fclose(file);
    LLVMFuzzerTestOneInput(bytes, size);
    n_inputs++;
    return 0;
}

#ifdef __AFL_FUZZ_TESTCASE_LEN
__AFL_FUZZ_INIT();

int main(void)
{
    __AFL_INIT();
    unsigned char *bytes = __AFL_FUZZ_TESTCASE_BUF;
    while (__AFL_LOOP(10000)) LLVMFuzzerTestOneInput(bytes, (size_t)__AFL_FUZZ_TESTCASE_LEN);
    (void)one_file;
    return 0;
}
#else
int main(int argc, char **argv)
{
    for (int i = 1; i < argc; i++) MUST(nftw(argv[i], one_file, 16, FTW_PHYS) == 0);
    printf("%ld inputs\n", n_inputs);
    return n_inputs > 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
#endif
