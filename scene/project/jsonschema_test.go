package project

import (
	"bytes"
	"encoding/json"
	"flag"
	"fmt"
	"os"
	"regexp"
	"slices"
	"strings"
	"testing"

	"github.com/pelletier/go-toml/v2"
)

var update = flag.Bool("update", false, "rewrite schema.json")

func TestSchemaIsCurrent(t *testing.T) {
	want, err := JSONSchema()
	if err != nil {
		t.Fatal(err)
	}
	if *update {
		if err := os.WriteFile("schema.json", want, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	got, err := os.ReadFile("schema.json")
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Error("schema.json is not what the key tables make; run the test with -update")
	}
}

// conforms checks the part of JSON Schema draft 7 that JSONSchema uses, and
// stops at words that it does not know.
func conforms(schema map[string]any, v any) error {
	for word, arg := range schema {
		var ok bool
		number, isNumber := v.(float64)
		list, isList := v.([]any)
		text, isText := v.(string)
		table, isTable := v.(map[string]any)
		switch word {
		case "$schema", "title", "description", "default":
			ok = true
		case "type":
			_, isBool := v.(bool)
			ok = map[string]bool{"number": isNumber, "integer": isNumber && number == float64(int64(number)), "array": isList,
				"string": isText, "object": isTable, "boolean": isBool}[arg.(string)]
		case "minimum":
			ok = !isNumber || number >= arg.(float64)
		case "exclusiveMinimum":
			ok = !isNumber || number > arg.(float64)
		case "maximum":
			ok = !isNumber || number <= arg.(float64)
		case "minItems":
			ok = !isList || len(list) >= int(arg.(float64))
		case "maxItems":
			ok = !isList || len(list) <= int(arg.(float64))
		case "minLength":
			ok = !isText || len(text) >= int(arg.(float64))
		case "pattern":
			ok = !isText || regexp.MustCompile(arg.(string)).MatchString(text)
		case "enum":
			ok = slices.Contains(arg.([]any), v)
		case "const":
			ok = v == arg
		case "items":
			ok = true
			for i, item := range list {
				if err := conforms(arg.(map[string]any), item); err != nil {
					return fmt.Errorf("[%d]: %w", i, err)
				}
			}
		case "required":
			ok = true
			for _, key := range arg.([]any) {
				if _, has := table[key.(string)]; isTable && !has {
					return fmt.Errorf("%s is missing", key)
				}
			}
		case "properties", "additionalProperties":
			ok = true
			known, _ := schema["properties"].(map[string]any)
			for key, value := range table {
				sub, has := known[key].(map[string]any)
				if !has {
					if arg == false {
						return fmt.Errorf("%s is not known", key)
					}
					sub, has = schema["additionalProperties"].(map[string]any)
				}
				if has {
					if err := conforms(sub, value); err != nil {
						return fmt.Errorf("%s: %w", key, err)
					}
				}
			}
		case "oneOf":
			fits := 0
			for _, one := range arg.([]any) {
				if conforms(one.(map[string]any), v) == nil {
					fits++
				}
			}
			ok = fits == 1
		default:
			return fmt.Errorf("word %q is new to this test", word)
		}
		if !ok {
			return fmt.Errorf("%v: not %s %v", v, word, arg)
		}
	}
	return nil
}

// TestSchemaAgreesWithLoad wants the schema to pass what Load passes and to
// refuse what breaks a rule within one key.
func TestSchemaAgreesWithLoad(t *testing.T) {
	text, err := JSONSchema()
	if err != nil {
		t.Fatal(err)
	}
	var schema map[string]any
	if err := json.Unmarshal(text, &schema); err != nil {
		t.Fatal(err)
	}
	// A local time of TOML has no JSON; editors show it as text.
	whole := strings.Replace(office(t), "to = 17:00:00", `to = "17:00"`, 1)
	for _, c := range []struct {
		name, old, new string
		ok             bool
	}{
		{"whole", "", "", true},
		{"range", "latitude_deg = 59.33", "latitude_deg = 95", false},
		{"unknown key", "north_deg", "north", false},
		{"unknown table", "[criteria]", "[criterion]", false},
		{"missing key", "unit = \"m\"\n", "", false},
		{"missing table", "[weather]\nfile = \"weather/stockholm.epw\"\nmoment_offset_h = -0.5\n", "", false},
		{"choice", `up = "y"`, `up = "x"`, false},
		{"array too short", "toward_m = [1, 0, 1.2]", "toward_m = [1, 0]", false},
		{"key of another type", "specular_reflectance = 0.7", "specular_reflectance = 0.7\npanes = 2", false},
		{"lobe too sharp", "spread_deg = 2", "spread_deg = 0.2", false},
		{"no base", "base = \"anodised\"\n", "", false},
		{"photons", "photons = 8000", "photons = 0", true},
		{"fewer than no photons", "photons = 8000", "photons = -8", false},
		{"shelf on the transom", "height_m = 1.2", "height_m = 0", true},
		{"shelf far below", "height_m = 1.2", "height_m = -1.5", false},
		{"day", `"mon"`, `"monday"`, false},
		{"loss", "loss_per_month = 0.02", "loss_per_month = 0.1", true},
		{"loss of more than a tenth", "loss_per_month = 0.02", "loss_per_month = 0.11", false},
		{"cleaned twice a month", "cleaning_months = 6", "cleaning_months = 0.5", false},
		{"soiling", "photons = 8000", "photons = 8000\nsoiling = \"neglected\"", true},
		{"another soiling", "photons = 8000", "photons = 8000\nsoiling = \"dirty\"", false},
	} {
		t.Run(c.name, func(t *testing.T) {
			changed := strings.Replace(whole, c.old, c.new, 1)
			if c.old != "" && changed == whole {
				t.Fatalf("the office holds no %q", c.old)
			}
			var values map[string]any
			if err := toml.Unmarshal([]byte(changed), &values); err != nil {
				t.Fatal(err)
			}
			data, err := json.Marshal(values)
			if err != nil {
				t.Fatal(err)
			}
			var v any
			if err := json.Unmarshal(data, &v); err != nil {
				t.Fatal(err)
			}
			if err := conforms(schema, v); (err == nil) != c.ok {
				t.Errorf("schema: got %v, want it to pass: %v", err, c.ok)
			}
			if _, err := load(t, changed); (err == nil) != c.ok {
				t.Errorf("Load: got %v, want it to pass: %v", err, c.ok)
			}
		})
	}
}
