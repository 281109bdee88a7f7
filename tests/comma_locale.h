/* A locale with a decimal comma, made for the test, whatever the system has installed. */
#ifndef TESTS_COMMA_LOCALE_H
#define TESTS_COMMA_LOCALE_H

#include <locale.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static char comma_directory[] = "/tmp/scantling-locale-XXXXXX";

/* Before the tests fork. Without `localedef` there will be no such locale. */
static inline void comma_locale_make(void)
{
    char command[300];
    if (mkdtemp(comma_directory) == NULL) abort();
    snprintf(command, sizeof command,
             "printf 'LC_NUMERIC\\ndecimal_point \",\"\\nthousands_sep \".\"\\ngrouping 3\\nEND LC_NUMERIC\\n"
             "LC_CTYPE\\ncopy \"POSIX\"\\nEND LC_CTYPE\\n' >%s/source && "
             "localedef -c -i %s/source -f ANSI_X3.4-1968 %s/comma >/dev/null 2>&1",
             comma_directory, comma_directory, comma_directory);
    if (system(command) == -1) abort(); /* it warns about what the source leaves out: what counts is if it can be set */
    setenv("LOCPATH", comma_directory, 1);
}

/* Switches to it; false when there is none. */
static inline bool comma_locale_set(void)
{
    char text[8];
    if (setlocale(LC_ALL, "comma") == NULL) setlocale(LC_NUMERIC, "comma");
    snprintf(text, sizeof text, "%.1f", 1.5);
    return strcmp(text, "1,5") == 0;
}

static inline void comma_locale_drop(void)
{
    char command[100];
    snprintf(command, sizeof command, "rm -r %s", comma_directory);
    if (system(command) != 0) abort();
}
#endif
