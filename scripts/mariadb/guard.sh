#!/bin/sh
# usage: guard.sh FOLDER PROGRAM [ARGUMENT …]
# Runs a program for as long as the owner keeps this script's standard input open. However the owner ends, even by
# kill -9, the program is asked to stop, and FOLDER, which is of use to that owner alone, is removed.
folder=$1
shift
exec 3<&0
owner=here
"$@" </dev/null 3<&- &
program=$!
trap 'owner=gone; kill -TERM "$program"' TERM
(
  read -r nothing <&3
  kill -TERM $$
) &
watcher=$!
wait "$program"
code=$?
if [ "$owner" = gone ]; then
  # The signal only ended the waiting: now for the program itself.
  wait "$program"
  code=$?
  rm -rf -- "$folder"
else
  kill "$watcher"
fi
exit "$code"
