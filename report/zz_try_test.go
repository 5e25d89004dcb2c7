package report
import ("testing";"os";"fmt";"bytes")
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
