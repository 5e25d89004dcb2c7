package report
import ("testing";"os";"fmt";"bytes";"time";"math/rand/v2")
func TestTry(t *testing.T){
 f:=os.Getenv("TRY"); if f=="" {t.Skip()}
 b,_:=os.ReadFile(f)
 var o bytes.Buffer
 asWritten.Convert(b,&o)
 fmt.Println(o.String())
}
func TestDump(t *testing.T){
 f:=os.Getenv("DUMP"); if f=="" {t.Skip()}
 var seed uint64
 fmt.Sscan(os.Getenv("SEED"),&seed)
 os.WriteFile(f,[]byte(markdownOf(t,randomDocument(seed,hostile))),0o644)
}
func TestDemo(t *testing.T){ d:=reportCase(); d.Blocks=append(d.Blocks,formulasCase().Blocks...); d.Blocks=append(d.Blocks,tableCase().Blocks[0]); d.Blocks=append(d.Blocks,listsCase().Blocks...); d.Blocks=append(d.Blocks, blocksCase().Blocks...);d.Blocks=append(d.Blocks, &Heading{4,say("four")},&Heading{5,say("five")}); os.WriteFile("/tmp/x.html",[]byte(htmlOf(t,d)),0o644); os.WriteFile("/tmp/x.md",[]byte(markdownOf(t,d)),0o644)}
func TestSoak(t *testing.T){
 secs:=os.Getenv("SOAK"); if secs=="" {t.Skip()}
 alpha:=[]rune("*_`~[]()<>\\|#-+.!&$:;=@^ab1 \n\"'/x{}%")
 rng:=rand.New(rand.NewPCG(uint64(time.Now().UnixNano()),7))
 mk:=func() string { n:=rng.IntN(9); r:=make([]rune,n); for i:=range r { r[i]=alpha[rng.IntN(len(alpha))] }; return string(r)}
 pl:=func(s string) string { if words(s)=="" {return s}; return "word"}
 d,_:=time.ParseDuration(secs); n:=0
 for st:=time.Now(); time.Since(st)<d; n++ {
  a,b:=mk(),mk()
  ok:=t.Run("", func(t *testing.T){ checkMarkdown(t,touching(a,b),touching(pl(a),pl(b)),true); checkHTML(t,touching2(a,b),touching2(pl(a),pl(b))) })
  if !ok { fmt.Printf("%q %q\n",a,b); t.FailNow() }
 }
 fmt.Println(n)
}
func touching2(a,b string) *Document { d:=touching(a,b); d.Blocks=d.Blocks[:5]; return d }
