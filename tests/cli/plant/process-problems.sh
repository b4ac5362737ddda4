# All problems of process.csv are told together.
small_plant
cat >plant/process.csv <<END
name,at,parameter,formula,argument,source,unit
dose,EFF,,chlorine-does,feed,EFF FLOW,
load,EFF,,mass-load,flow,EFF FLOW,
share,EFF,,percent-removal,influnt,INF BOD5,
END
"$weirbook" new small.book plant
