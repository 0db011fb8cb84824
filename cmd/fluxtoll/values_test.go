package main

import (
	"runtime/debug"
	"strings"
	"testing"
)

func TestByteSize(t *testing.T) {
	for text, want := range map[string]int{
		"1": 1, "4096B": 4096, "3kB": 3000, "2 MiB": 2 << 20, "1.5GiB": 3 << 29, "4GB": 4e9, "1TB": 1e12, "1TiB": 1 << 40,
	} {
		var b byteSize
		if err := b.Set(text); err != nil || b.value != want {
			t.Errorf("%q: %d, %v; want %d", text, b.value, err, want)
		}
	}
	for _, text := range []string{"", "GB", "-1", "0", "0.5", "1e30", "3XB", "3 k", "NaN", "Inf", "1GBB"} {
		var b byteSize
		if err := b.Set(text); err == nil {
			t.Errorf("%q is accepted as %d", text, b.value)
		}
	}
}

func TestUTF8Locale(t *testing.T) {
	for _, c := range []struct {
		all, ctype, lang string
		want             bool
	}{
		{"", "", "", false},
		{"C", "", "en_US.UTF-8", false},
		{"", "", "en_US.UTF-8", true},
		{"", "C", "en_US.UTF-8", false},
		{"de_DE.utf8", "C", "C", true},
	} {
		env := map[string]string{"LC_ALL": c.all, "LC_CTYPE": c.ctype, "LANG": c.lang}
		if got := utf8Locale(func(name string) string { return env[name] }); got != c.want {
			t.Errorf("%v: %v, want %v", env, got, c.want)
		}
	}
}

func TestDescribe(t *testing.T) {
	info := &debug.BuildInfo{Main: debug.Module{Version: "v1.2.3"}, Settings: []debug.BuildSetting{
		{Key: "vcs.revision", Value: "0123abc"}, {Key: "vcs.time", Value: "2026-01-02T03:04:05Z"}, {Key: "vcs.modified", Value: "true"},
	}}
	const want = "fluxtoll v1.2.3, commit 0123abc of 2026-01-02T03:04:05Z with changes, go"
	if got := describe(info); !strings.HasPrefix(got, want) {
		t.Errorf("%q, want it to start with %q", got, want)
	}
	if got := describe(&debug.BuildInfo{}); !strings.HasPrefix(got, "fluxtoll (devel), commit unknown, go") {
		t.Errorf("without build settings: %q", got)
	}
}
