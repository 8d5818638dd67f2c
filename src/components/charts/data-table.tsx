import type { ChartTable } from './chart-types.ts';

/** The data of a picture as a table that only screen readers meet. */
export function DataTable({ table }: { table: ChartTable }) {
  return (
    <div className="sr-only">
      <table>
        <caption>{table.caption}</caption>
        <thead>
          <tr>
            {table.columns.map((column) => (
              <th key={column} scope="col">
                {column}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {table.rows.map((cells, row) => (
            <tr key={row}>
              {cells.map((cell, col) => (col === 0 ? <th key={col} scope="row">{cell}</th> : <td key={col}>{cell}</td>))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
