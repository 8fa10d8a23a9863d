#!/bin/bash
# session.sh COMMAND...: runs a command in a session bus of its own. What the bus and its services print goes to standard error;
# the command's own report goes to the file descriptor named by UT_REPORT_FD, which is this script's standard output.
exec 3>&1 1>&2
export UT_REPORT_FD=3
exec dbus-run-session -- "$@"
