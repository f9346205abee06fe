import { type ComponentProps, type ReactNode, useEffect, useRef } from 'react';
import {
  type FieldErrors,
  type FieldValues,
  FormProvider,
  get,
  type Path,
  type Resolver,
  set,
  type UseFormReturn,
  useController,
  useForm,
  useFormContext,
} from 'react-hook-form';
import type { QuantityKind } from '../../shared/units/quantities.ts';
import { forgetDraft, readDraft, writeDraft } from '../lib/draft.ts';
import { CheckField, ChoiceField, FieldError, SelectField, TextField } from './field.tsx';
import type { QuantityDraft } from './quantity-draft.ts';
import { QuantityInput } from './quantity-input.tsx';

/** A complaint about a request at its JSON Pointer. */
export interface RequestError {
  pointer: string;
  code: string;
  message: string;
}

/** A field that holds no value, with the sentence that says so where the field does not say it by itself. */
export type Unreadable<V extends FieldValues> = Path<V> | { field: Path<V>; message: string };

export interface RequestFormSpec<V extends FieldValues> {
  /** What was typed lies under it in this tab, ids included, so that a second try is the same request. */
  draftKey: string;
  initial: () => V;
  /** The request, and the fields that hold something which is no value: those say so themselves. */
  toRequest: (values: V) => { request: unknown; unreadable: readonly Unreadable<V>[] };
  /** The shared schema's complaints, in words. */
  check: (request: unknown) => readonly RequestError[];
  /** Which field shows what is said of a place; a place stands for everything under it, the first that fits holds. */
  places: (values: V) => readonly (readonly [pointer: string, field: Path<V>])[];
}

/** Not a field: what no field shows stands at the foot of the form. */
const FOOT = 'atTheFoot';
const UNREADABLE = 'unreadable';

/**
 * A form whose fields are as people type them and whose request is checked by the schema that the server uses too.
 * What is typed survives a reload, a refusal and a lost connection.
 */
export function useRequestForm<V extends FieldValues>(spec: RequestFormSpec<V>) {
  const latest = useRef(spec);
  latest.current = spec;
  const begun = useRef<V | null>(null);
  begun.current ??= { ...spec.initial(), ...readDraft<V>(spec.draftKey) };
  const resolver = useRef<Resolver<V>>((values) => {
    const { toRequest, check, places } = latest.current;
    const { request, unreadable } = toRequest(values);
    const errors: FieldErrors<V> = {};
    for (const one of unreadable) {
      const { field, message } = typeof one === 'object' ? one : { field: one, message: '' };
      set(errors, field, { type: UNREADABLE, message });
    }
    for (const error of check(request)) {
      const field = fieldOf(places(values), error.pointer);
      if (!get(errors, field)) set(errors, field, { type: error.code, message: error.message });
    }
    return Object.keys(errors).length > 0 ? { values: {}, errors } : { values, errors: {} };
  }).current;
  const form = useForm<V>({ defaultValues: begun.current as never, resolver, shouldFocusError: false });
  useEffect(() => {
    const subscription = form.watch((values) => writeDraft(latest.current.draftKey, values));
    return () => subscription.unsubscribe();
  }, [form]);

  /** Checks, then sends; what is refused stands beside its field and is read out first. */
  const submit = (
    send: (request: never) => Promise<void>,
    wordsOf: (error: unknown) => readonly RequestError[] | Promise<readonly RequestError[]>,
  ) =>
    form.handleSubmit(
      async (values) => {
        try {
          await send(latest.current.toRequest(values as V).request as never);
        } catch (error) {
          for (const said of await wordsOf(error)) {
            const field = fieldOf(latest.current.places(values as V), said.pointer);
            form.setError(field as Path<V>, { type: said.code, message: said.message });
          }
          focusFirstError();
        }
      },
      () => focusFirstError(),
    );
  const forget = () => forgetDraft(latest.current.draftKey);
  return { form, submit, forget };
}

/**
 * Lays what was typed over a newer version of what the form began with: a field that was not touched takes the newer
 * value, the others keep what was typed.
 */
export function layOver<V extends FieldValues>(form: UseFormReturn<V>, before: V, newer: V): void {
  const typed = form.getValues();
  for (const name of Object.keys(newer) as Path<V>[]) {
    if (JSON.stringify(typed[name]) === JSON.stringify(before[name])) form.setValue(name, newer[name]);
  }
}

function fieldOf<V extends FieldValues>(places: ReturnType<RequestFormSpec<V>['places']>, pointer: string): string {
  const found = places.find(([place]) => pointer === place || pointer.startsWith(`${place}/`));
  return found ? found[1] : FOOT;
}

/** After the errors have been drawn. */
function focusFirstError(): void {
  requestAnimationFrame(() => {
    const field = document.querySelector<HTMLElement>('form [aria-invalid="true"], form [role="alert"]');
    field?.scrollIntoView?.({ block: 'center' });
    field?.focus({ preventScroll: true });
  });
}

export function RequestForm<V extends FieldValues>({
  form,
  onSubmit,
  id,
  children,
}: {
  form: UseFormReturn<V>;
  onSubmit: (event: React.FormEvent) => void;
  id: string;
  children: ReactNode;
}) {
  return (
    <FormProvider {...form}>
      <form noValidate id={id} onSubmit={onSubmit} className="flex flex-col gap-1">
        {children}
        <AtTheFoot />
      </form>
    </FormProvider>
  );
}

function AtTheFoot() {
  const message = useFieldError(FOOT);
  return message ? <FieldError>{message}</FieldError> : null;
}

/** The sentence at this field; a quantity that cannot be read is explained by its field itself. */
export function useFieldError(name: string): string | undefined {
  const {
    formState: { errors },
  } = useFormContext();
  const error = get(errors, name) as { type?: string; message?: string } | undefined;
  return error?.message || undefined;
}

type Without<P> = Omit<P, 'name' | 'value' | 'onChange' | 'error' | 'draft' | 'checked' | 'ref'>;

export function FormText({ name, ...props }: { name: string } & Without<ComponentProps<typeof TextField>>) {
  const { register } = useFormContext();
  return <TextField layout="row" {...props} error={useFieldError(name)} {...register(name)} />;
}

export function FormSelect({ name, ...props }: { name: string } & Without<ComponentProps<typeof SelectField>>) {
  const { field } = useController({ name });
  return (
    <SelectField
      layout="row"
      {...props}
      error={useFieldError(name)}
      value={field.value ?? ''}
      onChange={(event) => field.onChange(event.target.value)}
      onBlur={field.onBlur}
    />
  );
}

export function FormChoice({ name, ...props }: { name: string } & Without<ComponentProps<typeof ChoiceField>>) {
  const { field } = useController({ name });
  const error = useFieldError(name);
  return (
    <div>
      <ChoiceField {...props} name={name} value={field.value ?? ''} onChange={field.onChange} />
      {error ? <FieldError>{error}</FieldError> : null}
    </div>
  );
}

export function FormCheck({ name, ...props }: { name: string } & Without<ComponentProps<typeof CheckField>>) {
  const { field } = useController({ name });
  return (
    <CheckField {...props} checked={field.value === true} onChange={(event) => field.onChange(event.target.checked)} />
  );
}

export function FormQuantity<Kind extends QuantityKind>({
  name,
  ...props
}: { name: string } & Without<ComponentProps<typeof QuantityInput<Kind>>>) {
  const { field } = useController({ name });
  return (
    <QuantityInput<Kind>
      big={false}
      {...(props as ComponentProps<typeof QuantityInput<Kind>>)}
      name={name}
      error={useFieldError(name)}
      draft={field.value as QuantityDraft<Kind>}
      onChange={field.onChange}
    />
  );
}
