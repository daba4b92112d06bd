import { Tag } from '../../../components/ui/layout';
import type { OpenApiDocument, Operation } from '../api/openapi';
import { schemaFields, schemaWords, type SchemaField } from '../model/schema-words';

function Fields({ title, fields }: { title: string; fields: readonly SchemaField[] }) {
  if (!fields.length) return null;
  return (
    <>
      <h4>{title}</h4>
      <table className="op-fields">
        <thead className="vh"><tr><th scope="col">Name</th><th scope="col">Type</th><th scope="col">Meaning</th></tr></thead>
        <tbody>
          {fields.map((field) => (
            <tr key={field.name}>
              <th scope="row" className="mono">{field.name}{field.required ? '' : <em> optional</em>}</th>
              <td>{field.words}</td>
              <td>{field.description}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </>
  );
}

/** One address of the API: who may, what it takes, what it answers. */
export function OperationEntry({ path, method, operation, document }: { path: string; method: string; operation: Operation; document: OpenApiDocument }) {
  const components = document.components.schemas;
  const body = Object.entries(operation.requestBody?.content ?? {})[0];
  const success = Object.entries(operation.responses).find(([status]) => status.startsWith('2'));
  const answer = Object.entries(success?.[1].content ?? {})[0];
  return (
    <details className="op" id={operation.operationId}>
      <summary>
        <span className={`op-method op-${method}`}>{method.toUpperCase()}</span>
        <code className="mono">{path}</code>
        <span className="op-sum">{operation.summary}</span>
      </summary>
      <div className="op-in">
        <p>{operation.description}</p>
        <Fields title="In the address" fields={operation.parameters.map((p) => ({ name: p.name, words: `${schemaWords(p.schema)}${p.in === 'path' ? ', in the path' : ''}`, required: p.required, description: p.description ?? '' }))} />
        {body ? <Fields title={`Body, ${body[0]}`} fields={schemaFields(body[1].schema, components)} /> : null}
        <h4>Answer {success?.[0]} {answer ? <Tag>{answer[0]}</Tag> : null}</h4>
        {answer ? <Fields title="Fields" fields={schemaFields(answer[1].schema, components)} /> : <p className="sm">{success?.[1].description}</p>}
      </div>
    </details>
  );
}
