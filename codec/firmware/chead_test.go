package firmware

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// strict is what the header must compile with.
var strict = []string{"-std=c99", "-Wall", "-Wextra", "-Werror", "-pedantic", "-Wconversion", "-Wsign-conversion", "-Wundef", "-Wshadow", "-O2"}

// compiler finds the system's C compiler or skips.
func compiler(t *testing.T) string {
	t.Helper()
	for _, name := range []string{os.Getenv("CC"), "cc", "gcc", "clang"} {
		if path, err := exec.LookPath(name); name != "" && err == nil {
			return path
		}
	}
	t.Skip("no C compiler (CC, cc, gcc, clang): the exported C is not checked")
	return ""
}

// build compiles source with extra flags and returns the program.
func build(t *testing.T, cc, source string, flags ...string) string {
	t.Helper()
	program := strings.TrimSuffix(source, filepath.Ext(source)) + ".out"
	args := append(append(append([]string{}, strict...), flags...), "-o", program, "-x", "c", source)
	if out, err := exec.Command(cc, args...).CombinedOutput(); err != nil {
		t.Fatalf("%s %s: %v\n%s", cc, strings.Join(args, " "), err, out)
	}
	return program
}

// traps are flags that make undefined behaviour end the program, where the
// compiler has them.
func traps(t *testing.T, cc string) []string {
	source := filepath.Join(t.TempDir(), "try.c")
	flags := []string{"-fsanitize=undefined", "-fsanitize-undefined-trap-on-error"}
	write(t, source, "int main(void) { return 0; }\n")
	if exec.Command(cc, append(flags, "-o", source+".out", source)...).Run() != nil {
		t.Logf("%s cannot trap undefined behaviour", cc)
		return nil
	}
	return flags
}

func write(t *testing.T, path, text string) {
	t.Helper()
	if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
}

// cases lists every table to be compiled, under a name of its own.
func cases(t *testing.T) (tables []Table, names []string) {
	exports(t, func(_ *testing.T, e example, table Table) {
		tables = append(tables, table)
		names = append(names, e.name+" "+string(table.Assignment))
	})
	return tables, names
}

// provenance tries to break out of its comment.
const provenance = "lloyd-max:6 \"from\" data */ int x; /* nested **//\n" +
	"back\\\nslash??/\n/* ?????? Käse \u202e %d %s\r\n*/"

// All headers, included side by side in one strict program with undefined
// behaviour trapped: the code words of all 65,536 words and the levels of all
// 65,536 code words equal those computed here, bit for bit.
func TestCEqualsGo(t *testing.T) {
	cc := compiler(t)
	dir := t.TempDir()
	tables, names := cases(t)
	var head, body strings.Builder
	for i, table := range tables {
		name := fmt.Sprintf("%s %d", names[i][:min(len(names[i]), 20)], i)
		var c bytes.Buffer
		if err := table.C(&c, name, provenance); err != nil {
			t.Fatal(err)
		}
		write(t, filepath.Join(dir, fmt.Sprintf("t%d.h", i)), c.String())
		fmt.Fprintf(&head, "#include \"t%d.h\"\n", i)
		fmt.Fprintf(&head, "#include \"t%d.h\"\n", i) // the guard holds
		fmt.Fprintf(&body, "    for (x = -32768; x <= 32767; x++) put(%s_encode((int16_t)x));\n", Identifier(name))
		fmt.Fprintf(&body, "    for (x = 0; x <= 65535; x++) put((uint16_t)%s_decode((uint16_t)x));\n", Identifier(name))
	}
	source := filepath.Join(dir, "all.c")
	write(t, source, head.String()+"#include <stdio.h>\n"+
		"static void put(uint16_t v) { putchar(v & 0xFF); putchar(v >> 8); }\n"+
		"int main(void)\n{\n    int32_t x;\n"+body.String()+"    return 0;\n}\n")
	got, err := exec.Command(build(t, cc, source, traps(t, cc)...)).Output()
	if err != nil {
		t.Fatal(err)
	}
	if want := len(tables) * 2 * 2 << 16; len(got) != want {
		t.Fatalf("%d bytes from C, want %d", len(got), want)
	}
	for i, table := range tables {
		part := got[i*4<<16 : (i+1)*4<<16]
		for w := range 1 << 16 {
			if c, g := binary.LittleEndian.Uint16(part[2*w:]), uint16(table.Index(int16(w-32768))); c != g {
				t.Fatalf("%s: word %d: C %d, Go %d", names[i], w-32768, c, g)
			}
			if c, g := binary.LittleEndian.Uint16(part[2<<16+2*w:]), uint16(table.Value(w)); c != g {
				t.Fatalf("%s: code %d: C %d, Go %d", names[i], w, int16(c), int16(g))
			}
		}
	}
}

// The self-check passes as exported, and fails once a decision or a level is
// touched.
func TestSelfCheck(t *testing.T) {
	cc := compiler(t)
	dir := t.TempDir()
	for i, e := range []int{11, 1, 9} {
		x := examples()[e]
		table, err := Export(x.s, Options{})
		if err != nil {
			t.Fatal(err)
		}
		var c bytes.Buffer
		if err := table.C(&c, x.name, provenance); err != nil {
			t.Fatal(err)
		}
		check := func(label, text string, want bool) {
			source := filepath.Join(dir, fmt.Sprintf("%d%s.h", i, label))
			write(t, source, text)
			out, err := exec.Command(build(t, cc, source, "-DFEWBITS_"+strings.ToUpper(Identifier(x.name))+"_SELF_CHECK")).CombinedOutput()
			if (err == nil) != want {
				t.Errorf("%s, %s: %v: %s", x.name, label, err, out)
			}
		}
		check("whole", c.String(), true)
		if i > 0 {
			continue
		}
		check("decision", touched(c.String(), "_decisions["), false)
		check("level", touched(c.String(), "_levels["), false)
	}
}

// touched adds one to the first number of a table.
func touched(c, table string) string {
	i := strings.Index(c, table)
	i += strings.Index(c[i:], "{\n") + 2
	j := i + strings.IndexByte(c[i:], ',')
	var v int
	fmt.Sscan(c[i:j], &v)
	return c[:i] + fmt.Sprint("    ", v+1) + c[j:]
}

// The same table gives the same bytes, and a failing writer's error comes back.
func TestCIsDeterministic(t *testing.T) {
	table, _ := Export(smoothMu(64), Options{})
	var a, b bytes.Buffer
	if table.C(&a, "x", "p") != nil || table.C(&b, "x", "p") != nil || !bytes.Equal(a.Bytes(), b.Bytes()) {
		t.Error("two exports differ")
	}
	full, err := os.OpenFile("/dev/full", os.O_WRONLY, 0)
	if err != nil {
		t.Skip("no /dev/full")
	}
	defer full.Close()
	if table.C(full, "x", "p") == nil {
		t.Error("a full disk went unnoticed")
	}
}
