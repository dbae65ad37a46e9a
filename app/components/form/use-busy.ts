import { useNavigation } from "react-router";

/**
 * Whether a form of this page is on its way (never without script, where the page itself goes).
 * @param intent the value of the form's `intent`, on pages with several forms
 */
export function useBusy(intent?: string): boolean {
  const navigation = useNavigation();
  if (navigation.state === "idle" || navigation.formMethod !== "POST") return false;
  return intent === undefined || navigation.formData?.get("intent") === intent;
}
