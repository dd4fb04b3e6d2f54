package words

import (
	"go/ast"
	goparser "go/parser"
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"github.com/a-h/templ/parser/v2"
	"github.com/a-h/templ/parser/v2/visitor"
)

var letter = regexp.MustCompile(`\pL`)

// spoken are the attributes a reader or a screen reader meets.
var spoken = map[string]bool{"aria-label": true, "title": true, "alt": true, "placeholder": true, "content": true, "aria-description": true, "aria-roledescription": true}

// literals lists the text in a template that did not come from this package.
func literals(src string) (found []string, err error) {
	file, err := parser.ParseString(src)
	if err != nil {
		return nil, err
	}
	v := visitor.New()
	v.Text = func(n *parser.Text) error {
		if letter.MatchString(regexp.MustCompile(`&[a-z]+;`).ReplaceAllString(n.Value, "")) {
			found = append(found, n.Value)
		}
		return nil
	}
	v.StringExpression = func(n *parser.StringExpression) error {
		found = append(found, quoted(n.Expression.Value)...)
		return nil
	}
	v.ConstantAttribute = func(n *parser.ConstantAttribute) error {
		viewport := strings.Contains(n.Value, "width=device-width") || n.Value == "noindex" || n.Value == "light dark"
		if spoken[n.Key.String()] && letter.MatchString(n.Value) && !viewport {
			found = append(found, n.Key.String()+"="+n.Value)
		}
		return nil
	}
	v.ExpressionAttribute = func(n *parser.ExpressionAttribute) error {
		if spoken[n.Key.String()] {
			found = append(found, quoted(n.Expression.Value)...)
		}
		return nil
	}
	return found, v.VisitTemplateFile(file)
}

// quoted lists the string literals with letters that an expression would show: arguments of calls
// (a serial number, a class) are not shown as they stand.
func quoted(expr string) (found []string) {
	e, err := goparser.ParseExpr(expr)
	if err != nil {
		return []string{"not an expression: " + expr}
	}
	ast.Inspect(e, func(n ast.Node) bool {
		switch n := n.(type) {
		case *ast.CallExpr:
			return false
		case *ast.BasicLit:
			if s, err := strconv.Unquote(n.Value); err == nil && letter.MatchString(s) {
				found = append(found, s)
			}
		}
		return true
	})
	return found
}

func TestNoTemplateHoldsText(t *testing.T) {
	t.Parallel()
	files := 0
	err := filepath.WalkDir("..", func(path string, d fs.DirEntry, err error) error {
		if err != nil || filepath.Ext(path) != ".templ" {
			return err
		}
		files++
		src, err := os.ReadFile(path)
		if err != nil {
			return err
		}
		found, err := literals(string(src))
		if err != nil {
			t.Errorf("%s: %v", path, err)
		}
		for _, f := range found {
			t.Errorf("%s: literal text %q belongs into web/words", path, strings.TrimSpace(f))
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if files == 0 {
		t.Error("no template found; this test looks in the wrong place")
	}
}

func TestLiteralsAreFound(t *testing.T) {
	t.Parallel()
	for src, want := range map[string]int{
		"package x\n\ntempl a() {\n\t<p>Hello</p>\n}\n":                              1,
		"package x\n\ntempl a() {\n\t<p>{ \"Hello\" }</p>\n}\n":                      1,
		"package x\n\ntempl a() {\n\t<p title=\"Hello\"></p>\n}\n":                   1,
		"package x\n\ntempl a() {\n\t<p aria-label={ \"Day \" + n }></p>\n}\n":       1,
		"package x\n\ntempl a() {\n\tif x {\n\t\t<p>{ n } of { m }</p>\n\t}\n}\n":    1,
		"package x\n\ntempl a() {\n\t<p class=\"x\">{ p.Say(m) }&nbsp;·, 3</p>\n}\n": 0,
	} {
		found, err := literals(src)
		if err != nil || len(found) != want {
			t.Errorf("%q: found %q, %v; want %d", src, found, err, want)
		}
	}
}
