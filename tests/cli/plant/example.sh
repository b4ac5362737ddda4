"$weirbook" plant --example start
ls start
"$weirbook" new start.book start
"$weirbook" plant --example start
echo "exit status $?"
