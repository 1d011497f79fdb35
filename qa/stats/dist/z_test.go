package dist
import ("testing";"time";"fmt";"math")
func TestZ(t *testing.T){
 for _,c:=range [][3]float64{{1,1e6,1e6},{0.9999,1e8,1e8},{1.00001,1e10,1e10},{1,1e12,3},{1,1e15,1e15},{0.5,1e-3,1e-3},{2,1e-8,5}} {
  s:=time.Now(); l,u:=fTails(c[0],c[1],c[2]); fmt.Println(c,l,u,time.Since(s))
 }
 for _,df:=range []float64{1e-8,1e-3,.1,1e7,1e10,1e15,1e20,1e300}{ for _,x:=range []float64{1e-300,1e-5,.99999,1,1.00001,3,38}{
  s:=time.Now(); u:=StudentUpper(x,df); fmt.Println(df,x,u,NormalUpper(x),time.Since(s)) }
  for _,p:=range []float64{1e-300,1e-10,.2,.31,.4999999}{ s:=time.Now(); q:=StudentQuantile(p,df); fmt.Println("q",df,p,q,StudentLower(q,df)/p-1,time.Since(s))}}
 for _,p:=range []float64{5e-324,1e-310}{fmt.Println(StudentQuantile(p,5),StudentQuantile(p,1e6),NormalQuantile(p),FQuantile(p,5,5),FQuantile(p,1e5,1e5))}
 _ = math.Pi
}
