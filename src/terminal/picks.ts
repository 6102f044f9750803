/** What an open picker offers. */
import { digitsText, fixedText, lengthText, ohmText } from '../plot/quantity-text.ts';
import { analysisOf, type State } from './state.ts';
import { resolutionWith, windowChoices } from './window-choices.ts';

/** A thing to pick: its id, its name, and figures to choose by. */
export type Pick = { readonly id: string; readonly name: string; readonly figures: readonly string[] };

/** The picks left after the filter; empty when no picker is open. */
export function picksOf(state: State): readonly Pick[] {
  if (state.panel?.type !== 'pick') return [];
  const picks = state.panel.what === 'window' ? windowPicks(state) : cablePicks(state);
  const words = state.panel.filter.toLowerCase().split(/\s+/);
  return picks.filter((pick) => {
    const text = `${pick.id} ${pick.name}`.toLowerCase();
    return words.every((word) => text.includes(word));
  });
}

/** Row of the pick in use when a picker opens without a filter. */
export function presentPick(picks: readonly Pick[], presentId: string | null): number {
  return Math.max(
    0,
    picks.findIndex((pick) => pick.id === presentId),
  );
}

function windowPicks(state: State): readonly Pick[] {
  const analysis = analysisOf(state);
  const madeWith = state.request?.windowSpec ?? state.windowSpec;
  return windowChoices(state.windowSpec).map((choice) => ({
    id: choice.spec,
    name: choice.name,
    figures: [
      ...(analysis
        ? [`resolves ${lengthText(resolutionWith(analysis, madeWith, choice.spec), state.units, 3)}`]
        : []),
      `side lobes ${fixedText(choice.sideLobeDb, 0)} dB`,
    ],
  }));
}

function cablePicks(state: State): readonly Pick[] {
  return state.cables.map((cable) => ({
    id: cable.id,
    name: cable.name,
    figures: [ohmText(cable.z0Ohm), `velocity factor ${digitsText(cable.velocityFactor, 3)}`],
  }));
}
