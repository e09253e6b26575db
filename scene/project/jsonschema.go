package project

import (
	"encoding/json"
	"fmt"

	"github.com/pelletier/go-toml/v2"
)

// object is a JSON object; encoding/json writes its keys in sorted order.
type object = map[string]any

// JSONSchema is the JSON Schema (draft 7) of the project file, for editors,
// indented and ending in a line feed; schema.json in this folder holds the
// same. It knows tables, keys, types, ranges, choices and defaults. What
// spans several keys, such as names that must exist, Load alone checks.
func JSONSchema() ([]byte, error) {
	properties, required, err := propertiesOf(describe(projectKeys))
	if err != nil {
		return nil, err
	}
	for _, s := range sections() {
		table, err := tableSchema(s)
		if err != nil {
			return nil, err
		}
		if s.list {
			table = object{"type": "array", "items": table}
		}
		table["description"] = s.about
		properties[s.name] = table
		if s.needed() {
			required = append(required, s.name)
		}
	}
	text, err := json.MarshalIndent(object{
		"$schema": "http://json-schema.org/draft-07/schema#", "title": "squint project file",
		"type": "object", "properties": properties, "required": required, "additionalProperties": false,
	}, "", "  ")
	return append(text, '\n'), err
}

// needed is whether a file cannot do without the table.
func (s section) needed() bool {
	if s.list {
		return s.name == "mesh"
	}
	for _, k := range s.keys {
		if k.required {
			return true
		}
	}
	return false
}

func tableSchema(s section) (object, error) {
	if s.optional() {
		s.keys = append(s.keys[:len(s.keys):len(s.keys)], onlySpec)
	}
	if s.variants == nil {
		return closed(s.keys)
	}
	var either []object
	for _, v := range s.variants {
		o, err := closed(append(s.keys[:len(s.keys):len(s.keys)], v.keys...))
		if err != nil {
			return nil, err
		}
		o["properties"].(object)["type"] = object{"const": v.name, "description": v.about}
		either = append(either, o)
	}
	return object{"oneOf": either}, nil
}

func closed(keys []described) (object, error) {
	properties, required, err := propertiesOf(keys)
	o := object{"type": "object", "properties": properties, "additionalProperties": false}
	if len(required) > 0 {
		o["required"] = required
	}
	return o, err
}

func propertiesOf(keys []described) (properties object, required []string, err error) {
	properties = object{}
	for _, k := range keys {
		p := valueSchema(k)
		p["description"] = k.about
		if k.def != "" {
			var def struct{ V any }
			if err := toml.Unmarshal([]byte("v = "+k.def), &def); err != nil {
				return nil, nil, fmt.Errorf("default of %s: %w", k.name, err)
			}
			p["default"] = def.V
		}
		properties[k.name] = p
		if k.required {
			required = append(required, k.name)
		}
	}
	return properties, required, nil
}

func valueSchema(k described) object {
	number := object{"type": "number"}
	if !k.in.any() {
		number["minimum"], number["maximum"] = k.in.lo, k.in.hi
	}
	list := func(items object, least, most int) object {
		o := object{"type": "array", "items": items, "minItems": least}
		if most > 0 {
			o["maxItems"] = most
		}
		return o
	}
	const day = `^\d\d-\d\d$`
	switch k.field.(type) {
	case *string:
		o := object{"type": "string"}
		if k.choices != nil {
			o["enum"] = k.choices
		} else {
			o["minLength"] = 1
		}
		if k.name == "title" {
			delete(o, "minLength")
		}
		return o
	case *bool:
		return object{"type": "boolean"}
	case *int:
		number["type"] = "integer"
		return number
	case *uint64:
		return object{"type": "integer", "minimum": 0}
	case *float64, **float64:
		if k.form == clock {
			return object{"type": "string", "pattern": `^\d\d:\d\d$`}
		}
		return number
	case *[3]float64, **[3]float64:
		return list(number, 3, 3)
	case *[12]float64:
		if k.form == everyMonth {
			return number
		}
		return list(number, 12, 12)
	case *[4][3]float64:
		return list(list(number, 3, 3), 4, 4)
	case *[]float64:
		return list(number, 1, 0)
	case *[][2]float64:
		return list(list(number, 2, 2), 3, 0)
	case *[][3]float64:
		return list(list(number, 3, 3), 2, 0)
	case *[]HorizonPoint:
		return list(list(number, 2, 2), 0, 0)
	case *[7]bool:
		return list(object{"enum": dayNames}, 1, 7)
	case *[]MonthDay:
		return list(object{"type": "string", "pattern": day}, 0, 0)
	case **MonthDay:
		return object{"type": "string", "pattern": day}
	case *[]SlatState:
		o, _ := closed(describe(slatStateKeys)) // without defaults nothing can fail
		return list(o, 1, 0)
	case *[]string:
		return list(object{"type": "string", "minLength": 1}, 1, 0)
	case *[]ControlPeriod:
		o, err := closed(describe(periodKeys))
		if err != nil {
			return object{}
		}
		return list(o, 1, 0)
	case *[]Assignment:
		return object{"type": "object", "additionalProperties": object{"type": "string"}}
	}
	return object{}
}
