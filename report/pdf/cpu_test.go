package pdf
import ("testing";"io";"os";"strconv";"bytes";"syscall";"fmt")
func cpu() float64 { var r syscall.Rusage; syscall.Getrusage(0,&r); return float64(r.Utime.Sec+r.Stime.Sec)*1e3+float64(r.Utime.Usec+r.Stime.Usec)/1e3 }
func TestCPU(t *testing.T){ n,_:=strconv.Atoi(os.Getenv("N")); d:=usualReport(); var b bytes.Buffer; Write(io.Discard,&(*d),Options{}); Write(&b,d,Options{}); fmt.Println(bytes.Count(b.Bytes(),[]byte("/CIDToGIDMap")),"faces",bytes.Count(b.Bytes(),[]byte("/Type /Page\n")),"pages"); for range n {  Write(io.Discard,d,Options{}) } }
func TestCold(t *testing.T){ d:=usualReport(); c:=cpu(); Write(io.Discard,d,Options{}); fmt.Println("cold",cpu()-c); c=cpu(); for range 10 { Write(io.Discard,d,Options{}) }; fmt.Println("warm",(cpu()-c)/10) }
