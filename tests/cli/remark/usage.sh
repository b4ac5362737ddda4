# What cannot be taken is told in one line, and nothing is written.
small_book
remember small.book
try() { "$weirbook" "$@"; echo "exit status $?"; }
try remark --from 2025-03-04 --point EFG --cause x
try remark --from 2025-03-04 --point ABCDEFGH --cause x
try remark --from 2025-03-04 --point EFF --parameter BOD55 --cause x
try remark --from 2025-03-04 --point EFF --parameter BOD5 --statistic weekly-avarage --cause x
try remark --from 2025-03-04 --parameter BOD5 --statistic weekly-average --cause x
try remark --from 2025-03-04 --point EFF --parameter BOD5 --statistic percentile-N --cause x
try remark --from 2025-03-04 --event bypas --text x
try remark --from 2025-03-04 --event bypass
try remark --from 2025-03-04 --cause x --remedy y
try remark --from 2025-03-04
try remark --cause x
try remark --from 2025-03-04 --to 2025-03-03 --cause x
try remark --from 2025-02-30 --cause x
try remark --from 2025-03-04 --cause ''
try remark --from 2025-03-04 --cause "$(printf 'two\nlines')"
try remark --from 2025-03-04 --cause "$(printf 'bell\007')"
try remark --from 2025-03-04 --cause "$(printf 'latin \344')"
try remark --from 2025-03-04 --cause x --by "$(printf 'a\nb')"
try remark --withdraw 3
try remark --withdraw three --reason x
try remark --list --withdraw 3 --reason x
try remark --list --cause x
try remark --from 2025-03-04 --cause x --as csv
try remark --from 2025-03-04 --cause x --month 2025-03
try --read-only remark --from 2025-03-04 --cause x
unchanged
