# A withdrawn remark is kept and listed, and printed on no page.
small_book
"$weirbook" remark --from 2025-03-04 --point EFF --cause 'grit' --by 'day shift'
"$weirbook" remark --from 2025-02-27 --to 2025-03-02 --event bypass --text 'gate 2 open' --by 'day shift'
"$weirbook" remark --withdraw 3 --reason 'named the wrong day' --by 'night shift'
"$weirbook" remark --list --as csv | sed 's/20[0-9-]*T[0-9:]*Z/{when}/g'
"$weirbook" remark --list --month 2025-02 | sed "s/$(date -u +%F)/{today}/"
"$weirbook" remark --list --from 2025-03-03 --as csv | cut -d, -f1-4
"$weirbook" remark --list --month 2025-04
"$weirbook" permit --month 2025-03 --on 2025-04-10 | sed -n '/^Remarks$/,/^Every/p'
"$weirbook" remark --withdraw 3 --reason 'again'
echo "exit status $?"
"$weirbook" remark --withdraw 2 --reason 'a file'
echo "exit status $?"
"$weirbook" remark --withdraw 99 --reason 'none'
echo "exit status $?"
