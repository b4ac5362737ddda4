# Drafts of notices: facts filled in, every page marked, and a draft that a person has filled in is left as it is.
. "$(dirname "$common")/rules/hangs.inc"
demo_march
"$weirbook" permit --month 2025-03 --notices drafts --aware '2025-03-20 09:30'
echo "exit status $?"
ls drafts
cat drafts/notice-24-hours-2025-03-11-001.txt
echo "The dosing pump lost its prime." >>drafts/notice-5-days-2025-03-11-001.txt
remember drafts/notice-5-days-2025-03-11-001.txt
"$weirbook" permit --month 2025-03 --notices drafts | tail -n 9
unchanged drafts/notice-5-days-2025-03-11-001.txt
"$weirbook" permit --month 2025-03 --notices drafts --aware 2025-03-12 --as csv
tail -n 2 drafts/notice-5-days-2025-03-11-001.txt
"$weirbook" permit --month 2025-02 --notices none
echo "exit status $?"
[ -e none ] || echo "no folder was made"
