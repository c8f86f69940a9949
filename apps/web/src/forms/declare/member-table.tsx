import type { Team } from "@weighhouse/campaign/document";
import type { ListedMember } from "@weighhouse/desk/list-members";
import { Table } from "@/look/table";

/** Who takes part, in which role and for which team. */
export function MemberTable(props: { members: readonly ListedMember[]; teams: readonly Team[] }) {
  const titles = new Map(props.teams.map(({ key, title }) => [key, title]));
  const withAddresses = props.members.some(({ email }) => email !== null);
  return (
    <Table
      caption="People of this campaign"
      head={
        <tr>
          <th scope="col">Name</th>
          {withAddresses ? <th scope="col">E-mail</th> : null}
          <th scope="col">Role</th>
          <th scope="col">Team</th>
        </tr>
      }
    >
      {props.members.map(({ member, name, email, role, team }) => (
        <tr key={member}>
          <th scope="row">{name}</th>
          {withAddresses ? <td data-label="E-mail">{email ?? ""}</td> : null}
          <td data-label="Role">
            {role}
            {role === "coordinator" && team !== null ? ", and in a team" : ""}
          </td>
          <td data-label="Team">{team === null ? "none" : (titles.get(team) ?? team)}</td>
        </tr>
      ))}
    </Table>
  );
}
