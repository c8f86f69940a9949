import type { ListedWebhook } from "@weighhouse/desk/list-webhooks";
import { Table } from "@/look/table";
import { Time } from "@/look/time";

type Delivery = ListedWebhook["deliveries"][number];

/** What was sent to a webhook, the newest first. */
export function DeliveryRows(props: { deliveries: readonly Delivery[]; url: string }) {
  return (
    <Table
      caption={`Deliveries to ${props.url}, the newest first`}
      stackBelow="middle"
      head={
        <tr>
          <th scope="col">Delivery</th>
          <th scope="col">Queued</th>
          <th scope="col" className="number">
            Tries
          </th>
          <th scope="col">How it went</th>
        </tr>
      }
    >
      {props.deliveries.map((delivery) => (
        <tr key={delivery.id}>
          <th scope="row">
            <span title={delivery.id}>{delivery.what === "test" ? "test" : "standings"}</span>
          </th>
          <td data-label="Queued">
            <Time at={delivery.queuedAt} />
          </td>
          <td data-label="Tries" className="number">
            {delivery.tries}
          </td>
          <td data-label="How it went">
            <Outcome delivery={delivery} />
          </td>
        </tr>
      ))}
    </Table>
  );
}

function Outcome({ delivery }: { delivery: Delivery }) {
  const { deliveredAt, givenUpAt, lastStatus, lastError, lastTryAt } = delivery;
  if (deliveredAt !== null) {
    return (
      <span>
        arrived <Time at={deliveredAt} />, answered {lastStatus}
      </span>
    );
  }
  if (givenUpAt !== null) {
    return <span className="text-rust [overflow-wrap:anywhere]">did not arrive: {lastError}</span>;
  }
  if (lastTryAt === null) return <span className="text-quiet">on its way</span>;
  return (
    <span className="[overflow-wrap:anywhere]">
      not yet, will be tried again: {lastError}{" "}
      <span className="text-quiet">
        (<Time at={lastTryAt} />)
      </span>
    </span>
  );
}
