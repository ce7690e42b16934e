package catalog
import ("testing";"os")
func TestZZ(t *testing.T){ c,err:=Parse(os.DirFS("/tmp/catconv/all")); if err!=nil {t.Fatal("\n"+err.Error())}; t.Log(len(c.Solvents)) }
func BenchmarkAll(b *testing.B){ fs:=os.DirFS("/tmp/catconv/all"); for b.Loop() { Parse(fs) } }
func BenchmarkLoad(b *testing.B){ for b.Loop() { if _,err:=Parse(files);err!=nil{b.Fatal(err)} } }
