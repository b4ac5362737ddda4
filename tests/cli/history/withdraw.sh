# A file loaded by mistake is taken back whole; what it replaced is in force again, what was corrected since stays.
small_book
cat >wrong.csv <<END
date,point,parameter,value,unit
2025-03-11,EFF,BOD5,99,mg/L
2025-03-12,EFF,BOD5,98,mg/L
2025-03-13,EFF,BOD5,97,mg/L
END
"$weirbook" export >before.csv
"$weirbook" load --by tester --revise --reason 'so the file says' wrong.csv | head -1
"$weirbook" withdraw 3 --reason 'the file of another plant' --by lab
"$weirbook" export >after.csv
cmp before.csv after.csv && echo "as before"
"$weirbook" withdraw 3 --reason again
echo "exit status $?"
"$weirbook" withdraw 1 --reason 'a description'
echo "exit status $?"
"$weirbook" withdraw 99 --reason none
echo "exit status $?"
"$weirbook" withdraw three --reason none
echo "exit status $?"
"$weirbook" withdraw 2
echo "exit status $?"
"$weirbook" --read-only withdraw 2 --reason x
echo "exit status $?"
"$weirbook" amend --date 2025-03-18 --point EFF --parameter BOD5 --value 3 --reason 'read anew' --by lab
"$weirbook" withdraw 2 --reason 'load it again' --by lab
echo "exit status $?"
"$weirbook" export
"$weirbook" load --by tester march.csv
"$weirbook" export --from 2025-03-11 --to 2025-03-18
"$weirbook" check | head -1
