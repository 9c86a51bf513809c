/* The program. */
#include "app/command.h"

int main(int argc, char **argv)
{
    return ev_app_run(argc, argv);
}
