"$weirbook" help
"$weirbook" >short
"$weirbook" help >long
cmp short long
