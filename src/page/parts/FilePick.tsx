// A button that asks for files.

/** `onPick` gets what was chosen, never nothing. */
export function FilePick(props: {
  label: string;
  accept: string;
  multiple?: boolean;
  onPick: (files: readonly File[]) => void;
}) {
  return (
    <label className="filepick">
      <input
        type="file"
        multiple={props.multiple ?? false}
        accept={props.accept}
        onChange={(e) => {
          const files = [...(e.target.files ?? [])];
          e.target.value = "";
          if (files.length > 0) props.onPick(files);
        }}
      />
      <span>{props.label}</span>
    </label>
  );
}
