'use server';

import { revalidatePath } from 'next/cache';
import { z } from 'zod';
import { formAction } from '@/lib/auth/action';
import { idField } from '@/lib/auth/fields';
import { paths } from '@/lib/paths';
import { confirmShop } from '@/lib/services/confirm-shop';

export const confirmShopAction = formAction(
  { schema: z.object({ shop: idField }), access: 'steward' },
  async ({ input, person }) => {
    await confirmShop({ person, shopId: input.shop });
    revalidatePath(paths.stewardShops);
    return { message: 'Confirmed.' };
  },
);
