import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Sheet } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { AnyOf } from '@/components/ui/WordsToPress';
import { fieldErrors } from '@/lib/client/fieldErrors';
import { useAct } from '@/lib/client/useApi';
import { roleSchema, type Role } from '@/lib/contracts/common';
import { invitePerson, listPeople } from '@/lib/contracts/people';
import { ShownLinkBox } from './ShownLinkBox';

/** Adds a person and shows the link that lets them in, once. */
export function InviteSheet({ onClose }: { onClose: () => void }) {
  const [name, setName] = useState('');
  const [email, setEmail] = useState('');
  const [roles, setRoles] = useState<Role[]>([]);
  const act = useAct(invitePerson, [listPeople]);
  const errors = fieldErrors(act.error);
  return (
    <Sheet
      title="Invite a person"
      onClose={onClose}
      unsaved={!act.data && (name !== '' || email !== '')}
      foot={
        act.data ? (
          <Button kind="filled" size="foot" fill onPress={onClose}>
            Done
          </Button>
        ) : (
          <Button
            kind="filled"
            size="foot"
            fill
            busy={act.isPending}
            onPress={() => act.mutate({ body: { name, email, roles } })}
          >
            Make the invitation
          </Button>
        )
      }
    >
      {act.data ? (
        <View style={styles.done}>
          <Text>{`${act.data.person.name} can join with this link.`}</Text>
          <ShownLinkBox link={act.data.link} />
        </View>
      ) : (
        <View>
          <TextField label="Name" value={name} onChangeText={setName} error={errors.name} />
          <TextField
            label="E-mail"
            value={email}
            onChangeText={setEmail}
            inputMode="email"
            autoCapitalize="none"
            error={errors.email}
          />
          <Text variant="small" weight={500} style={styles.label}>
            Roles
          </Text>
          <AnyOf<Role>
            label="Roles"
            choices={roleSchema.options.map((role) => ({ value: role, label: role }))}
            values={roles}
            onToggle={(role, on) => setRoles(on ? [...roles, role] : roles.filter((one) => one !== role))}
          />
          {act.error && Object.keys(errors).length === 0 ? (
            <Text variant="small" tone="danger" role="alert" style={styles.label}>
              {act.error.message}
            </Text>
          ) : null}
        </View>
      )}
    </Sheet>
  );
}

const styles = StyleSheet.create({ done: { gap: 12 }, label: { marginTop: 8, marginBottom: 4 } });
