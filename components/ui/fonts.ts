/** The faces that ship with the product, by the names that styles and the drawing table use. */
export const fontFiles = {
  HankenGrotesk_400Regular: require('../../assets/fonts/HankenGrotesk_400Regular.ttf') as number,
  HankenGrotesk_500Medium: require('../../assets/fonts/HankenGrotesk_500Medium.ttf') as number,
  HankenGrotesk_600SemiBold: require('../../assets/fonts/HankenGrotesk_600SemiBold.ttf') as number,
  HankenGrotesk_700Bold: require('../../assets/fonts/HankenGrotesk_700Bold.ttf') as number,
  ChivoMono_400Regular: require('../../assets/fonts/ChivoMono_400Regular.ttf') as number,
  ChivoMono_500Medium: require('../../assets/fonts/ChivoMono_500Medium.ttf') as number,
  ChivoMono_600SemiBold: require('../../assets/fonts/ChivoMono_600SemiBold.ttf') as number,
};

export type FontName = keyof typeof fontFiles;

const textFaces: Record<number, FontName> = {
  400: 'HankenGrotesk_400Regular',
  500: 'HankenGrotesk_500Medium',
  600: 'HankenGrotesk_600SemiBold',
  700: 'HankenGrotesk_700Bold',
};
const figureFaces: Record<number, FontName> = {
  400: 'ChivoMono_400Regular',
  500: 'ChivoMono_500Medium',
  600: 'ChivoMono_600SemiBold',
};

/** The face of a family at a weight; figures end at 600. */
export function face(family: 'text' | 'figure', weight: number): FontName {
  const faces = family === 'text' ? textFaces : figureFaces;
  return faces[weight] ?? (family === 'text' ? 'HankenGrotesk_400Regular' : 'ChivoMono_400Regular');
}
