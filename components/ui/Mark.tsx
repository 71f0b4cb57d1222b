import { color } from './theme';

/** The mark: a comb whose last teeth stand again at its front, joined by the prefix's arc. */
export function Mark({ size = 22, label }: { size?: number; label?: string }) {
  return (
    <svg
      width={size}
      height={size}
      viewBox="0 0 64 64"
      role={label ? 'img' : undefined}
      aria-label={label}
      aria-hidden={label ? undefined : true}
      style={{ color: color.ink.strong, flexShrink: 0 }}
    >
      <path
        d="M9.5 17C13 6 51 6 54.5 17"
        fill="none"
        stroke={color.cell.tone.fill}
        strokeWidth={2}
        strokeLinecap="round"
      />
      <path fill={color.cell.tone.fill} d="M4 29h4v21h3V22h4v34H4z" />
      <path fill={color.cell.tone.fill} d="M49 29h4v21h3V22h4v34H49z" />
      <path fill="currentColor" d="M21 29h4v21h3V29h4v21h3V29h4v21h3V29h4v21h3v6H21z" />
    </svg>
  );
}
