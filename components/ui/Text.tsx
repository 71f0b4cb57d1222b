import { Text as PlainText, type TextProps as PlainTextProps, type TextStyle } from 'react-native';
import { face } from './fonts';
import { color } from './theme';
import { type as scale } from './tokens';

export type TextVariant = keyof typeof scale;
export type TextTone =
  | 'strong'
  | 'body'
  | 'quiet'
  | 'faint'
  | 'onSolid'
  | 'onSelected'
  | 'disabled'
  | 'accent'
  | 'danger'
  | 'warning'
  | 'success'
  | 'inherit';

const toneColors: Record<Exclude<TextTone, 'inherit'>, string> = {
  strong: color.ink.strong,
  body: color.ink.body,
  quiet: color.ink.quiet,
  faint: color.ink.faint,
  onSolid: color.ink.onSolid,
  onSelected: color.ink.onSelected,
  disabled: color.ink.disabled,
  accent: color.accent.text,
  danger: color.danger.text,
  warning: color.warning.text,
  success: color.success.text,
};

/** The style of a step of the type scale; also for text fields. */
export function textStyle(variant: TextVariant, weight?: 400 | 500 | 600 | 700): TextStyle {
  const step = scale[variant];
  const figures = step.family === 'figure';
  return {
    fontFamily: face(step.family, weight ?? step.weight),
    fontSize: step.size,
    lineHeight: step.line,
    letterSpacing: step.tracking,
    ...(variant === 'stamp' ? { textTransform: 'uppercase' as const } : {}),
    ...(figures ? ({ fontFeatureSettings: '"tnum", "zero"' } as object) : {}),
  };
}

export interface TextProps extends PlainTextProps {
  variant?: TextVariant;
  tone?: TextTone;
  weight?: 400 | 500 | 600 | 700;
  /** Makes it a heading of this level for readers. */
  heading?: 1 | 2 | 3;
}

/** Text in the product's type scale. Figures (variant figure…) are set in the figure face. */
export function Text({ variant = 'body', tone = 'body', weight, heading, style, ...rest }: TextProps) {
  const headingProps = heading ? { role: 'heading' as const, 'aria-level': heading } : {};
  return (
    <PlainText
      {...headingProps}
      {...rest}
      style={[textStyle(variant, weight), tone === 'inherit' ? null : { color: toneColors[tone] }, style]}
    />
  );
}
