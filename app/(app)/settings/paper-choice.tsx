"use client";

import { Option, OptionGroup } from "@/components/ui/field";
import { chooseTheme, THEMES, useTheme } from "@/components/ui/theme";

export function PaperChoice() {
  const theme = useTheme();
  return (
    <div className="max-w-90">
      <OptionGroup legend="Show pages">
        {THEMES.map(({ value, label }) => (
          <Option key={value} type="radio" name="paper" checked={theme === value} onChange={() => chooseTheme(value)}>{label}</Option>
        ))}
      </OptionGroup>
    </div>
  );
}
