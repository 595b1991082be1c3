import { type ComponentProps, type MouseEvent, type ReactNode, useId } from "react";
import { Link, type LinkProps } from "react-router-dom";
import { Icon, type IconName } from "./icon.tsx";

/** go: the one filled button of a view; back: takes back or away; bare: "Cancel". */
type ButtonKind = "outline" | "go" | "bare" | "back";

interface Look {
  kind?: ButtonKind;
  icon?: IconName;
  small?: boolean;
}

const classes = ({ kind = "outline", small = false }: Look, more = "") => `btn${kind === "outline" ? "" : ` ${kind}`}${small ? " sm" : ""} ${more}`;

export interface ButtonProps extends Omit<ComponentProps<"button">, "disabled">, Look {
  /** Why it is not possible now. The button stays in the tab order, so that the reason can be found and heard. */
  impossible?: string | null | undefined;
  /** Under way: pressed again, nothing happens. */
  busy?: boolean;
}

export function Button({ kind, icon, small, impossible, busy = false, className, onClick, title, children, type = "button", ...rest }: ButtonProps) {
  const why = useId();
  const blocked = Boolean(impossible) || busy;
  const press = (event: MouseEvent<HTMLButtonElement>) => {
    if (blocked) event.preventDefault();
    else onClick?.(event);
  };
  return (
    <button
      {...rest}
      type={type}
      className={classes({ kind, small }, className)}
      aria-disabled={impossible ? true : undefined}
      aria-busy={busy || undefined}
      aria-describedby={impossible ? why : rest["aria-describedby"]}
      title={impossible ?? title}
      onClick={press}
    >
      {icon && <Icon name={icon} />}
      {children}
      {impossible && (
        <span id={why} hidden>
          {impossible}
        </span>
      )}
    </button>
  );
}

export function LinkButton({ kind, icon, small, className, children, ...rest }: LinkProps & Look) {
  return (
    <Link {...rest} className={classes({ kind, small }, className)}>
      {icon && <Icon name={icon} />}
      {children}
    </Link>
  );
}

export interface IconButtonProps extends Omit<ButtonProps, "icon" | "children" | "aria-label"> {
  icon: IconName;
  /** Says what it does, to the eye that hovers and to the ear. */
  label: string;
  iconSize?: number;
}

export function IconButton({ icon, label, iconSize = 16, className = "", ...rest }: IconButtonProps) {
  return (
    <Button {...rest} className={`icon ${className}`} aria-label={label} title={rest.title ?? label}>
      <Icon name={icon} size={iconSize} />
    </Button>
  );
}

/** Buttons that belong together, joined: undo and redo. */
export const ButtonPair = ({ children, label }: { children: ReactNode; label: string }) => (
  <fieldset className="pair" aria-label={label}>
    {children}
  </fieldset>
);
