/* main.c - the program: finds the command.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <signal.h>
#include <stdio.h>
#include <string.h>

#include "cli/commands.h"

static const struct {
    const char *name, *arguments, *help;
    int (*run)(const Arguments *a);
} commands[] = {
    {"check", "FRAME", "the whole job: factors with their tally, fixity, ledger, margins; stored", command_check},
    {"show", "WHAT FRAME|RESULTS", "one table", command_show},
    {"new", "", "a commented frame file to start from, on standard output", command_new},
};
enum { NCOMMANDS = sizeof commands / sizeof commands[0] };

static int help(FILE *out, int status)
{
    fprintf(out, "endfix finds the real end fixity of every tube of a welded frame.\n\n");
    for (int i = 0; i < NCOMMANDS; i++) fprintf(out, "  endfix %-5s %-19s %s\n", commands[i].name, commands[i].arguments, commands[i].help);
    fprintf(out, "\nshow WHAT is one of:\n");
    for (size_t i = 0; table_kind(i); i++) fprintf(out, "  %-10s %s\n", table_kind(i)->name, table_kind(i)->help);
    fprintf(out, "\noptions:\n");
    print_options(out);
    fprintf(out, "\nexit status: 0 all well; 1 a margin is negative or a factor below the required one; 2 fault in the input;\n"
                 "3 the tally was not completed; 4 files or system.\n"
                 "Not a substitute for local codes, certification, test and a licensed engineer's judgement.\n");
    return finish(status);
}

static void on_interrupt(int signal_number)
{
    (void)signal_number;
    ef_interrupt();
}

int main(int argc, char **argv)
{
    Arguments a;
    signal(SIGPIPE, SIG_IGN); /* a closed pipe is a write error with a message */
    signal(SIGXFSZ, SIG_IGN); /* so is a file size limit */
    signal(SIGINT, on_interrupt);
    signal(SIGTERM, on_interrupt);
    if (!read_arguments(argc, argv, &a)) return 2;
    if (a.version) {
        printf("endfix " EF_VERSION "\n");
        return finish(0);
    }
    if (a.help) return help(stdout, 0);
    if (a.nword == 0) return help(stderr, 2);
    const char *known[NCOMMANDS];
    for (int i = 0; i < NCOMMANDS; i++) {
        known[i] = commands[i].name;
        if (strcmp(a.word[0], commands[i].name) == 0) return commands[i].run(&a);
    }
    const char *near = nearest_word(a.word[0], NCOMMANDS, known);
    fprintf(stderr, "endfix: there is no command %s.%s%s%s\n", a.word[0], near ? " Did you mean " : " See endfix --help.", near ? near : "", near ? "?" : "");
    return 2;
}
